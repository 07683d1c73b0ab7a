// The names at the right ends of curves, moved apart anew where some are hidden or an
// axis has changed.
const list = (v) => (v === undefined ? [] : Array.isArray(v) ? v : [v])
const leading = 14 // px, from line to line

// spread moves the centres of labels apart so that none overlaps its neighbour and all
// stay from lo to hi where there is room: groups that meet move together about their mean.
export function spread(at, height, lo, hi) {
  const order = at.map((_, i) => i).sort((a, b) => at[a] - at[b] || a - b)
  const groups = []
  const fit = (g) => Object.assign(g, { top: Math.max(lo, Math.min(g.want / g.of.length, hi - g.height)) })
  for (const i of order) {
    let g = fit({ of: [i], height: height[i], want: at[i] - height[i] / 2 })
    for (let b = groups[groups.length - 1]; b && b.top + b.height > g.top; b = groups[groups.length - 1]) {
      groups.pop()
      g = fit({ of: [...b.of, ...g.of], height: b.height + g.height, want: b.want + g.want - b.height * g.of.length })
    }
    groups.push(g)
  }
  const out = []
  for (const g of groups) {
    let y = g.top
    for (const i of g.of) {
      out[i] = y + height[i] / 2
      y += height[i]
    }
  }
  return out
}

// respread places the names of the curves that are shown in an option as drawn, and gives
// the series of names that it changed.
export function respread(option, off) {
  const out = []
  list(option.grid).forEach((grid, panel) => {
    const x = list(option.xAxis)[panel], y = list(option.yAxis)[panel]
    const names = list(option.series).filter((s) => s.id.startsWith('~end') && (s.yAxisIndex || 0) === panel && !off.has(s.name) && s.data[0].value[0] >= x.max - 1e-9 * Math.abs(x.max))
    const from = (s) => grid.height * (1 - (s.data[0].value[1] - y.min) / (y.max - y.min))
    const at = names.map((s) => Math.max(0, Math.min(grid.height, from(s))))
    const places = spread(at, names.map((s) => s.data[0].name.split('\n').length * leading), -8, grid.height + 8)
    names.forEach((s, i) => {
      s.data[0].label.offset = [7, places[i] - from(s)]
      out.push({ id: s.id, data: s.data })
    })
  })
  return out
}
