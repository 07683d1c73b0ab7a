// From the option as written to the option as drawn: what depends on the width of
// the drawing (margins, ticks, panels beside each other) and the formatters, which
// options call by name ("fn:name") since they hold no code.
import { labels, number, ticks, width } from './ticks.js'

const size = 12.5 // px, of the labels

const registry = {
  // name: the name of the item, as plain text.
  name: () => (params) => params.name,
  // tip: all values at the pointer, as elements; set by the page.
  tip: (option) => (params) => registry.tooltip(params, option),
}
export const setTooltip = (f) => { registry.tooltip = f }

const px = (v) => (typeof v === 'number' ? v : parseFloat(v))
const list = (v) => (v === undefined ? [] : Array.isArray(v) ? v : [v])

// prepare fills in an option for a drawing of the given width in px. The option is changed.
export function prepare(option, total) {
  const grids = list(option.grid), xs = list(option.xAxis), ys = list(option.yAxis)
  const low = option.windows || [] // of zoomed x axes: [from, to]
  const margin = (y) => (y.show === false ? 0 : Math.max(...y.axisLabel.shown.map((t) => width(t, size))) + 10)

  ys.forEach((y) => {
    mark(y, px(grids[y.gridIndex || 0].height), y.names ? 13 : 40)
    if (y.names) y.axisLabel.shown.forEach((name, i, all) => { all[i] = cut(name, total < 500 ? 80 : 130) })
  })
  if (option.beside) {
    const own = ys.filter((y) => y.axisLabel.show !== false).length > 1
    const left = Math.max(26, ...ys.map(margin))
    const gap = own ? left + 10 : total < 500 ? 16 : 24
    const right = px(grids[0].right)
    const each = (total - left - right - gap * (grids.length - 1)) / grids.length
    grids.forEach((g, i) => {
      g.left = left + i * (each + gap)
      g.width = each
      delete g.right
    })
  } else {
    const left = Math.max(26, ...ys.map(margin))
    grids.forEach((g) => {
      g.left = left
      g.width = total - left - px(g.right)
      delete g.right
    })
  }
  xs.forEach((x, i) => {
    mark(x, grids[x.gridIndex || 0].width, option.beside ? 44 : 56, low[i])
    if (x.name) Object.assign(x.nameTextStyle, { width: grids[x.gridIndex || 0].width + 16, overflow: 'break' })
  })
  if (option.beside) meet(xs, grids)
  for (const s of list(option.series)) if (s.rise) turn(s, xs[s.xAxisIndex || 0], ys[s.yAxisIndex || 0], grids)
  for (const s of list(option.series)) straighten(s, xs[s.xAxisIndex || 0], ys[s.yAxisIndex || 0])
  for (const axis of [...xs, ...ys]) {
    if (axis.type !== 'log') continue
    Object.assign(axis, { type: 'value', log: true, min: Math.log10(axis.min), max: Math.log10(axis.max) })
  }
  for (const s of list(option.series)) if (/^~(ring|linename)/.test(s.id)) keep(s, xs[s.xAxisIndex || 0], grids, total)
  for (const t of list(option.title)) place(t, grids, total)
  const legend = option.legend
  if (legend && legend.show !== false) legend.left = grids[0].left - 5
  resolve(option, option)
  return option
}

// turn lays names along a diagonal of two logarithmic axes.
function turn(series, x, y, grids) {
  const g = grids[x.gridIndex || 0]
  const angle = (Math.atan2(px(g.height) / Math.log(y.max / y.min), g.width / Math.log(x.max / x.min)) * 180) / Math.PI
  for (const d of series.data) d.label.rotate = series.rise * angle
}

// keep keeps the names of places inside the drawing: one that would leave it stands on the other side of its
// place, or in lines on the wider side.
function keep(series, x, grids, total) {
  const g = grids[x.gridIndex || 0]
  for (const { name, value, label } of list(series.data)) {
    if (!name || !label || label.rotate) continue
    const at = g.left + (g.width * (value[0] - x.min)) / (x.max - x.min), off = Math.abs(label.offset[0])
    const room = { left: total - at - off, right: at - off } // of a text that begins, or ends, at its place
    const long = width(name, size)
    if (!(long > room[label.align])) continue
    const other = label.align === 'left' ? 'right' : 'left'
    if (room[other] > room[label.align]) Object.assign(label, { align: other, offset: [other === 'left' ? off : -off, label.offset[1]] })
    if (long > room[label.align]) Object.assign(label, { width: room[label.align], overflow: 'break' })
  }
}

// straighten takes logarithms for logarithmic axes: such an axis is drawn as a plain
// one of the logarithms, so that zooming is even along it.
function straighten(series, x, y) {
  const logs = [x.type === 'log', y.type === 'log']
  if (!logs[0] && !logs[1]) return
  const turn = (v, i) => (logs[i % 2] ? Math.log10(v) : v)
  series.data = series.data.map(ArrayBuffer.isView(series.data) ? turn : (d) => (Array.isArray(d) ? d.map(turn) : Object.assign(d, { value: d.value.map(turn) })))
}

// mark puts ticks on an axis px long, of which the window [from, to] is seen.
export function mark(axis, px, space, window) {
  const log = axis.log || axis.type === 'log'
  const [lo, hi] = window || [axis.min, axis.max]
  let values, shown
  if (axis.names) {
    const all = axis.names.filter(([at]) => at >= lo && at <= hi)
    const per = px / (hi - lo)
    values = [], shown = []
    // From the top down: the highest level is always named.
    for (const [at, name] of all.reverse()) {
      if (values.length && (values[values.length - 1] - at) * per < space) continue
      values.push(at)
      shown.push(name)
    }
  } else {
    values = ticks(lo, hi, log, px, space)
    shown = labels(values, log)
  }
  const at = log ? values.map((v) => Math.log10(v)) : values
  axis.axisTick = Object.assign({}, axis.axisTick, { customValues: at }, axis.axisLabel.show === false ? { show: false } : {})
  axis.axisLabel = Object.assign({}, axis.axisLabel, {
    customValues: at,
    shown,
    formatter: (v) => shown[at.findIndex((a) => Math.abs(a - v) <= 1e-9 * (1 + Math.abs(v)))] || '',
  })
}

// cut shortens a text to limit px.
function cut(text, limit) {
  if (width(text, size) <= limit) return text
  const letters = [...text]
  while (letters.length > 1 && width(letters.join(''), size) > limit - 8) letters.pop()
  return letters.join('') + '…'
}

// meet takes the number from the end of an axis where the next panel's begins too near.
function meet(xs, grids) {
  xs.forEach((x, i) => {
    if (i + 1 === xs.length || x.names) return
    const a = x.axisLabel, next = xs[i + 1].axisLabel, last = a.customValues.length - 1
    if (x.type === 'log') return
    const at = (axis, v, g) => g.left + (g.width * (v - axis.min)) / (axis.max - axis.min)
    const room = at(xs[i + 1], next.customValues[0], grids[i + 1]) - at(x, a.customValues[last], grids[i])
    if (room < (width(a.shown[last], size) + width(next.shown[0], size)) / 2 + 6) a.shown[last] = ''
  })
}

// place puts a heading over its panel, or over all.
function place(title, grids, total) {
  if (title.panel === undefined) return
  const last = grids[grids.length - 1]
  if (title.panel < 0) {
    title.left = (grids[0].left + last.left + last.width) / 2
    return
  }
  const g = grids[title.panel]
  if (title.over === 'plot') {
    title.left = g.left
    title.textStyle.width = g.width + 8
    title.textStyle.overflow = 'break'
  } else {
    title.left = 0
    title.textStyle.width = total
    title.textStyle.overflow = 'break'
  }
}

// resolve puts functions where the option names them.
function resolve(node, option) {
  if (Array.isArray(node)) node.forEach((n) => resolve(n, option))
  else if (node && typeof node === 'object') {
    for (const key of Object.keys(node)) {
      const v = node[key]
      if (key === 'formatter' && typeof v === 'string') {
        const make = v.startsWith('fn:') && registry[v.slice(3)]
        if (make) node[key] = make(option)
        else delete node[key]
      } else if (!ArrayBuffer.isView(v)) resolve(v, option)
    }
  }
}
export { number }
