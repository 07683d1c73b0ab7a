// What a reader keeps of a figure: the static picture as a file of its own, and the
// values that are drawn.
import { pairs } from './packed.js'

// picture is the static picture with the faces that it is written in.
export function picture(twin) {
  const svg = (twin.querySelector('.wide') || twin.querySelector('svg')).cloneNode(true)
  const [, , width, height] = svg.getAttribute('viewBox').split(' ')
  svg.removeAttribute('class')
  svg.setAttribute('width', width)
  svg.setAttribute('height', height)
  // The style is written into the text: as an element here it would break the page's policy.
  const text = new XMLSerializer().serializeToString(svg)
  const from = text.indexOf('>') + 1
  return '<?xml version="1.0" encoding="UTF-8"?>\n' + text.slice(0, from) + `<style>${faces('Label')}</style>` + text.slice(from) + '\n'
}

// faces is the rules of the page that hold a face.
function faces(name) {
  const out = []
  for (const sheet of document.styleSheets) {
    for (const rule of sheet.cssRules) {
      if (rule.type === CSSRule.FONT_FACE_RULE && rule.style.getPropertyValue('font-family').replace(/["']/g, '') === name) out.push(rule.cssText)
    }
  }
  return out.join('\n')
}

// data is the drawn values as CSV: two columns a curve, what it stands over and its value.
export function data(option) {
  const list = (v) => (Array.isArray(v) ? v : [v])
  const columns = []
  const head = (...parts) => (unit) => cell(parts.filter(Boolean).join(': ') + (unit ? ` [${unit}]` : ''))
  for (const s of list(option.series)) {
    if (s.id[0] !== 's') continue
    const axes = [list(option.xAxis)[s.xAxisIndex || 0], list(option.yAxis)[s.yAxisIndex || 0]]
    const panel = option.grid.length > 1 && option.title.find((t) => t.panel === (axes[0].gridIndex || 0) && t.textStyle.fontWeight > 400)
    axes.forEach((axis, i) => columns.push([head(panel && panel.text, s.name, axis.label)(axis.unit), ...pairs(s.data).map((p) => String(p[i]))]))
  }
  const rows = Math.max(...columns.map((c) => c.length))
  let text = ''
  for (let i = 0; i < rows; i++) text += columns.map((c) => c[i] ?? '').join(',') + '\r\n'
  return text
}

// cell is a text that no spreadsheet runs as a formula, quoted where CSV asks for it.
function cell(text) {
  const inert = /^[\s\u0000-\u001f\ufeff]*[=+\-@\uff1d\uff0b\uff0d\uff20]/.test(text) ? "'" + text : text
  return /[",\r\n]/.test(inert) ? `"${inert.replaceAll('"', '""')}"` : inert
}

// save hands a text over as a file.
export function save(name, type, text) {
  const a = document.createElement('a')
  a.href = URL.createObjectURL(new Blob([text], { type }))
  a.download = name
  a.click()
  setTimeout(() => URL.revokeObjectURL(a.href), 10_000)
}
