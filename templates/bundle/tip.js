// The values at the pointer: the running value above, one row a curve below. Made of
// elements, so that a name is never read as markup.
import { count } from './packed.js'
import { number } from './ticks.js'

const element = (name, text, style) => {
  const e = document.createElement(name)
  if (text) e.textContent = text
  if (style) Object.assign(e.style, style)
  return e
}

const quantity = (v, unit) => number(v, 4) + (unit ? '\u00a0' + unit : '')

// swatch is a piece of the curve: its dash and thickness tell it apart, not its colour alone.
function swatch(style) {
  const ns = 'http://www.w3.org/2000/svg'
  const svg = document.createElementNS(ns, 'svg')
  for (const [k, v] of Object.entries({ width: 26, height: 8, viewBox: '0 0 26 8', 'aria-hidden': 'true' })) svg.setAttribute(k, v)
  const path = document.createElementNS(ns, 'path')
  path.setAttribute('d', 'M0 4H26')
  path.setAttribute('stroke', style.color)
  path.setAttribute('stroke-width', style.width)
  if (Array.isArray(style.type)) path.setAttribute('stroke-dasharray', style.type.join(' '))
  svg.append(path)
  Object.assign(svg.style, { display: 'inline-block', width: '26px', marginRight: '7px', verticalAlign: 'middle' })
  return svg
}

// between is the value of a curve between two of its points, as drawn; undefined
// where it has none, or runs back and forth.
function between(data, along, v) {
  let i = -1
  for (let k = 0; k < count(data); k++) {
    if (k > 0 && data[2 * k + along] <= data[2 * k - 2 + along]) return undefined
    if (i < 0 && data[2 * k + along] >= v) i = k
  }
  if (i < 1) return undefined
  const [a, b] = [i - 1, i].map((k) => [data[2 * k], data[2 * k + 1]])
  const share = (v - a[along]) / (b[along] - a[along])
  const other = 1 - along
  const p = []
  p[along] = v
  p[other] = a[other] + share * (b[other] - a[other])
  return p
}

// own is the points of a curve at a place; where it jumps there are two. A stroke
// across, as a weight drawn from zero, says its end.
function own(data, along, at) {
  const out = []
  const across = count(data) === 2 && data[along] === data[2 + along]
  for (let i = across ? 2 : 0; i < data.length; i += 2) if (data[i + along] === at) out.push([data[i], data[i + 1]])
  return out
}

// nearest is the place of a point of the curves that lies nearest.
function nearest(curves, along, v) {
  let at
  for (const s of curves) {
    for (let i = along; i < s.data.length; i += 2) if (at === undefined || Math.abs(s.data[i] - v) < Math.abs(at - v)) at = s.data[i]
  }
  return at
}

export function tooltip(params, option) {
  const along = option.tooltip.axisPointer.axis === 'y' ? 1 : 0 // which of x, y runs
  const hit = Array.isArray(params) ? params : [params]
  const axisOf = (s, i) => (i ? option.yAxis[s.yAxisIndex || 0] : option.xAxis[s.xAxisIndex || 0])
  const read = (s, p, i) => (axisOf(s, i).log ? Math.pow(10, p[i]) : p[i])
  const curves = option.series.filter((s) => s.id[0] === 's' && option.legend?.selected?.[s.name] !== false)
  if (!hit.length || !curves.length) return ''
  // Of a long curve the chart draws, and finds, only some points: what it says is read from all of them.
  const at = (hit.find((p) => p.seriesId[0] === 's') || { value: [] }).value[along] ?? nearest(curves, along, hit[0].value[along])
  const first = curves.find((s) => own(s.data, along, at).length)
  if (!first) return ''
  // A curve without a point just here is read off between its neighbours.
  const row = (s) => {
    const points = own(s.data, along, at)
    if (points.length) return { s, text: [...new Set(points.map((p) => number(read(s, p, 1 - along), 4)))].join(' / ') }
    const p = s.name && between(s.data, along, at)
    return p && { s, text: '\u2248\u2009' + number(read(s, p, 1 - along), 3) }
  }
  const named = curves.filter((s) => s.name).map(row).filter(Boolean)
  const rows = named.length ? named : curves.map(row).filter(Boolean).slice(0, 8)

  // What a curve is called: its name, the quantity, or the heading of its panel.
  const panel = (s) => axisOf(s, 0).gridIndex || 0
  const heading = (s) => option.title.find((t) => t.over === 'plot' && t.panel === panel(s))
  const called = (s) => {
    const many = option.grid.length > 1
    if (s.name) return many && s.name !== s.axis ? `${s.name}, ${s.axis}` : s.name
    const shared = many && rows.some((r) => r.s !== s && r.s.axis === s.axis)
    return shared && heading(s) ? heading(s).text.split(':')[0] : s.axis
  }

  const box = element('div')
  const axis = axisOf(first, along)
  const v = axisOf(first, along).log ? Math.pow(10, at) : at
  const word = (axis.names || []).find(([at]) => Math.abs(at - v) < 1e-6 * (axis.max - axis.min))
  const head = `${axis.label || ''} ${word ? word[1] : quantity(v, axis.unit)}`.trim()
  const said = []
  box.append(element('div', head, { fontWeight: 600, marginBottom: '2px' }))
  const table = element('table', '', { borderCollapse: 'collapse', font: 'inherit', width: 'auto', margin: 0 })
  for (const { s, text } of rows) {
    const tr = element('tr')
    const cell = { padding: '1px 0', border: 0, font: 'inherit' }
    const name = element('td', '', cell)
    name.append(swatch(s.lineStyle), element('span', called(s)))
    const unit = s.units[1 - along]
    tr.append(name, element('td', text + (unit ? '\u00a0' + unit : ''), { ...cell, paddingLeft: '14px', textAlign: 'right', fontVariantNumeric: 'tabular-nums' }))
    table.append(tr)
    said.push(called(s) + ' ' + text + (unit ? '\u00a0' + unit : ''))
  }
  box.append(table)
  option.said = head + ': ' + said.join(', ') // for those who do not see it
  return box
}
