// Every figure of a page, used by pointer and by key.
import { readFileSync } from 'node:fs'
import { settle } from './watch.mjs'

// The reader of points of the page's own script: packed_test.go holds it to what was written.
const reader = readFileSync(new URL('../../templates/bundle/packed.js', import.meta.url), 'utf8').replaceAll('export ', '')
const optionOf = `window.optionOf = (f) => {
  const option = unpack(JSON.parse(f.querySelector('script').textContent))
  for (const s of option.series) if (ArrayBuffer.isView(s.data)) s.data = pairs(s.data)
  return option
}`

export async function figures(page) {
  await page.evaluate(`{ ${reader}\n${optionOf} }`)
  const out = []
  for (const figure of await page.$$('figure[data-chart]')) out.push(await use(page, figure))
  return out
}

async function use(page, figure) {
  await figure.evaluate((f) => f.scrollIntoView({ block: 'center', behavior: 'instant' }))
  await figure.waitForSelector('.live svg')
  await settle(page)
  const report = await figure.evaluate((f) => ({ id: f.id, label: f.querySelector('.live').getAttribute('aria-label') }))
  report.twin = await figure.evaluate((f) => f.querySelector('.twin').getClientRects().length)
  report.tip = await tip(page, figure)
  await page.mouse.move(0, 0)
  report.cursor = await cursor(page, figure)
  report.keys = await keys(page, figure)
  report.scale = await scale(page, figure)
  report.curves = await curves(page, figure)
  report.zoom = await zoom(page, figure)
  report.saved = await saved(page, figure)
  return report
}

// button is the shown button with one of the names.
const button = async (figure, ...names) => {
  for (const b of await figure.$$('.tools button')) {
    if ((await b.isVisible()) && names.includes(await b.textContent())) return b
  }
}

// state is what the chart shows once it is drawn: the words of its picture, and the number and shape of its lines.
// In no order: the library writes what comes back into sight after what was there.
const state = (figure) => figure.evaluate(async (f) => {
  for (let i = 0; i < 2; i++) await new Promise(requestAnimationFrame)
  const svg = f.querySelector('.live svg')
  const lines = [...svg.querySelectorAll('path')].map((p) => p.getAttribute('d')).sort()
  return { words: [...svg.querySelectorAll('text')].map((t) => t.textContent).sort().join('|'), lines: lines.length, shape: lines.join(''), height: f.querySelector('.live').clientHeight }
})
const same = (a, b) => a.words === b.words && a.lines === b.lines && a.shape === b.shape && a.height === b.height

// tip moves the pointer over the chart and reads the values shown there against the data.
async function tip(page, figure) {
  await page.mouse.move(0, 0)
  const box = await (await figure.$('.live')).boundingBox()
  const found = { words: '', curves: 0, rows: [], wrong: [] }
  for (const [dx, dy] of [[0.31, 0.35], [0.2, 0.5], [0.45, 0.6]]) {
    await page.mouse.move(box.x + box.width * dx - 3, box.y + box.height * dy)
    await page.mouse.move(box.x + box.width * dx, box.y + box.height * dy)
    await settle(page)
    Object.assign(found, await figure.evaluate(read))
    if (found.rows.length) break
  }
  return found
}

// read is the open tooltip, its rows, and those whose value or unit is not of the figure's data.
function read(f) {
  const option = window.optionOf(f)
  const named = option.series.filter((s) => s.id[0] === 's')
  const shown = [...f.querySelectorAll('.live > div')].find((d) => d.querySelector('table') && d.getClientRects().length > 0 && getComputedStyle(d).visibility === 'visible' && Number(getComputedStyle(d).opacity) > 0.5)
  if (!shown) return { rows: [] }
  const number = (text) => {
    const raised = '⁰¹²³⁴⁵⁶⁷⁸⁹'
    const t = text.replaceAll('\u2212', '-').replaceAll('\u202f', '')
    const m = /^(-?[0-9.]*)(?:×?10([⁻⁰¹²³⁴⁵⁶⁷⁸⁹]+))?$/.exec(t)
    if (!m) return NaN
    const e = m[2] ? Number([...m[2]].map((c) => (c === '⁻' ? '-' : raised.indexOf(c))).join('')) : 0
    return (m[1] === '' || m[1] === '-' ? Number(m[1] + '1') : Number(m[1])) * 10 ** e
  }
  const along = option.tooltip.axisPointer.axis === 'y' ? 1 : 0
  const words = shown.querySelector('div > div').firstChild.textContent
  const axis = option[along ? 'yAxis' : 'xAxis'][0]
  const head = words.slice((axis.label ?? '').length).trim()
  const word = axis.names?.find(([, name]) => name === head) // the name of a level
  const here = word ? word[0] : number(axis.unit && head.endsWith('\u00a0' + axis.unit) ? head.slice(0, -axis.unit.length - 1) : head)
  const across = (s) => s.data.length === 2 && s.data[0][along] === s.data[1][along]
  const heading = (s) => option.title.find((t) => t.over === 'plot' && t.panel === (option.xAxis[s.xAxisIndex || 0].gridIndex || 0))?.text.split(':')[0]
  if (axis.unit && !word && !head.endsWith('\u00a0' + axis.unit)) return { words, rows: [], wrong: [`${words} without the unit ${axis.unit}`] }
  const rows = [], wrong = []
  for (const tr of shown.querySelectorAll('tr')) {
    const [name, value] = [...tr.children].map((c) => c.textContent)
    rows.push(`${name} ${value}`)
    const s = named.filter((s) => name === s.name || name === `${s.name}, ${s.axis}` || name === heading(s) || name === s.axis)
    // Strokes across, one a level, are one quantity.
    if (s.length > 1 && !s.every(across)) wrong.push(`${name} may be any of ${s.length} curves`)
    const unit = s.length ? s[0].units[1 - along] : undefined
    if (!s.length) wrong.push(`no curve ${name}`)
    else if (unit && !value.endsWith('\u00a0' + unit)) wrong.push(`${name}: ${value} without the unit ${unit}`)
    for (const text of (unit ? value.slice(0, -unit.length - 1) : value).split(' / ')) {
      const v = number(text.replace('\u2248\u2009', ''))
      const near = (y) => Math.abs(y - v) <= 6e-4 * Math.abs(y) + 1e-12
      const at = s.flatMap((s) => (across(s) ? s.data.slice(1) : s.data)).filter((p) => Math.abs(p[along] - here) <= 6e-4 * Math.abs(here) + 1e-12).map((p) => p[1 - along])
      if (text[0] !== '\u2248') {
        if (!at.some(near)) wrong.push(`${name}: ${value} (${v}) is no value of the curve at ${here}`)
        continue
      }
      const i = s[0].data.findIndex((p) => p[along] >= here)
      const [a, b] = s[0].data.slice(Math.max(i - 1, 0), i + 1).map((p) => p[1 - along])
      const slack = 5e-3 * Math.max(Math.abs(a), Math.abs(b))
      if (!(v >= Math.min(a, b) - slack && v <= Math.max(a, b) + slack)) wrong.push(`${name}: ${value} (${v}) is not between ${a} and ${b} at ${here}`)
    }
  }
  const box = shown.getBoundingClientRect(), live = f.querySelector('.live').getBoundingClientRect()
  if (box.left < live.left - 1 || box.right > live.right + 1) wrong.push('the values stand outside the chart')
  const one = named.filter((s, i) => !across(s) || named.findIndex((t) => across(t) && t.axis === s.axis && t.xAxisIndex === s.xAxisIndex) === i)
  return { words, curves: one.filter((s) => s.name).length || one.length, rows, wrong }
}

// cursor reads values by key: from place to place, to both ends, and away again; what is spoken is what is shown, and
// the other charts of the block that run along the same axis show the same place.
async function cursor(page, figure) {
  const live = await figure.$('.live')
  const up = await figure.evaluate((f) => window.optionOf(f).tooltip.axisPointer.axis === 'y')
  const on = up ? 'ArrowUp' : 'ArrowRight', back = up ? 'ArrowDown' : 'ArrowLeft'
  const press = async (key) => {
    await live.press(key)
    await settle(page)
    return { ...(await figure.evaluate(read)), said: await figure.$eval('[aria-live]', (e) => e.textContent) }
  }
  const first = await press(on), second = await press(on), before = await press(back), end = await press('End'), start = await press('Home')
  const together = await figure.evaluate((f) => {
    const axis = (g) => { const o = window.optionOf(g); const w = o.tooltip.axisPointer.axis; const a = o[w + 'Axis'][0]; return w + a.label + a.unit }
    const words = (g) => [...g.querySelectorAll('.live > div')].find((d) => d.querySelector('table') && d.getClientRects().length > 0 && getComputedStyle(d).visibility === 'visible')?.querySelector('div > div').textContent
    const others = [...document.querySelectorAll('figure[data-chart]')].filter((g) => g !== f && g.dataset.block === f.dataset.block && axis(g) === axis(f) && g.querySelector('.live svg'))
    return { others: others.length, led: others.filter((g) => words(g) !== undefined).length }
  })
  await live.press('Escape')
  await page.waitForTimeout(150) // the values go after a moment
  const gone = { ...(await figure.evaluate(read)), said: await figure.$eval('[aria-live]', (e) => e.textContent) }
  return {
    wrong: [first, second, before, end, start].flatMap((r) => r.wrong ?? ['no values']), rows: first.rows.length, steps: new Set([first, second, end].map((r) => r.words)).size,
    back: before.words === first.words && start.words !== end.words, said: [first, end].every((r) => r.said.startsWith(r.words + ': ') && r.rows.every((row) => r.said.includes(row))),
    gone: gone.rows.length === 0 && gone.said === '', hint: await figure.$eval('.hint', (e) => getComputedStyle(e).display !== 'none'), ...together,
  }
}

// saved keeps the picture and the values as files.
async function saved(page, figure) {
  const open = await button(figure, 'save')
  if (!open) return null
  await press(open)
  const files = []
  for (const name of ['picture, svg', 'values, csv']) {
    const [download] = await Promise.all([page.waitForEvent('download'), press(await button(figure, name))])
    files.push({ name: download.suggestedFilename(), text: readFileSync(await download.path(), 'utf8') })
  }
  await press(open)
  const [picture, values] = files
  const seen = await figure.evaluate((f, text) => {
    const d = new DOMParser().parseFromString(text.replace(/<style>.*?<\/style>/s, ''), 'image/svg+xml')
    const texts = (e) => [...e.querySelectorAll('text')].map((t) => t.textContent).join('|')
    const away = [...d.querySelectorAll('*')].flatMap((e) => [...e.attributes]).filter((a) => (/(^|:)(href|src)$/.test(a.name) && a.value[0] !== '#') || /url\((?!["']?#)/.test(a.value))
    return { alone: away.length === 0 && !/url\((?!["']?data:)/.test(/<style>(.*?)<\/style>/s.exec(text)[1]), whole: !d.querySelector('parsererror') && texts(d) === texts(f.querySelector('.twin .wide')), points: Math.max(...window.optionOf(f).series.filter((s) => s.id[0] === 's').map((s) => s.data.length)) }
  }, picture.text)
  return {
    names: files.map((f) => f.name), whole: seen.whole, faces: picture.text.split('@font-face').length - 1,
    // Nothing from elsewhere: the only address is the name of the language.
alone: seen.alone, rows: values.text.trimEnd().split('\r\n').length - 1, points: seen.points,
  }
}

// keys goes from the figure by Tab and tells which of its controls were reached, and which not.
async function keys(page, figure) {
  await figure.evaluate((f) => { f.tabIndex = -1; f.focus({ preventScroll: true }) })
  const reached = []
  for (;;) {
    await page.keyboard.press('Tab')
    const at = await figure.evaluate((f) => {
      const e = document.activeElement
      if (!f.contains(e)) return null
      const ring = getComputedStyle(e)
      return (e.className === 'live' ? 'chart' : e.textContent) + (ring.outlineStyle === 'none' || ring.outlineWidth === '0px' ? ' without a ring' : '')
    })
    if (at === null || reached.length > 40) break
    reached.push(at)
  }
  const want = await figure.evaluate((f) => {
    f.removeAttribute('tabindex')
    return [...f.querySelectorAll('.live[tabindex="0"], button, a[href]')].filter((e) => e.getClientRects().length > 0).map((e) => (e.className === 'live' ? 'chart' : e.textContent))
  })
  return { reached, want }
}

// press presses a button by key, click by pointer, which then goes away.
const press = (b, key = 'Enter') => b.press(key)
const click = async (page, b) => { await b.click(); await page.mouse.move(0, 0) }

// scale goes to plain axes and back.
async function scale(page, figure) {
  const b = await button(figure, 'linear')
  if (!b) return null
  const before = await state(figure)
  await press(b)
  const after = await state(figure), named = await b.textContent()
  await click(page, b)
  return { changed: !same(before, after), named, back: same(before, await state(figure)) }
}

// curves hides and shows each curve in turn.
async function curves(page, figure) {
  const open = await button(figure, 'curves')
  if (!open) return null
  await click(page, open)
  const report = { expanded: await open.getAttribute('aria-expanded'), names: [], gone: 0, back: 0 }
  let before = await state(figure)
  for (const b of await figure.$$('.tools [data-of=curves] button')) {
    report.names.push(await b.textContent())
    await press(b)
    const off = await state(figure)
    if (off.lines < before.lines && (await b.getAttribute('aria-pressed')) === 'false') report.gone++
    await press(b, 'Space')
    const again = await state(figure)
    if (same(before, again) && (await b.getAttribute('aria-pressed')) === 'true') report.back++
    before = again
  }
  await press(open)
  report.closed = !(await figure.$eval('.tools [data-of=curves]', (e) => e.getClientRects().length))
  return report
}

// zoom goes nearer and back, by the buttons and by keys on the chart.
async function zoom(page, figure) {
  const b = await button(figure, 'zoom')
  if (!b) return null
  const before = await state(figure)
  await click(page, b)
  const whole = await state(figure)
  const report = { pressed: await b.getAttribute('aria-pressed'), higher: whole.height > before.height }
  await press(await button(figure, '+'))
  report.nearer = (await state(figure)).words !== whole.words
  const reset = await button(figure, 'reset')
  report.reset = reset !== undefined
  await press(await button(figure, '\u2212'))
  await press(await button(figure, '+'))
  const first = await state(figure)
  await press(await button(figure, '\u2192'))
  const moved = await state(figure)
  await press(await button(figure, '\u2190'))
  report.moved = moved.words !== first.words && (await state(figure)).words === first.words
  await press(await button(figure, '\u2212'))
  report.farther = (await state(figure)).words === whole.words && !(await button(figure, 'reset'))
  const live = await figure.$('.live')
  await live.press('+')
  const near = await state(figure)
  await live.press('Shift+ArrowRight')
  report.keys = near.words !== whole.words && (await state(figure)).words !== near.words
  await press(await button(figure, 'reset'))
  report.whole = (await state(figure)).words === whole.words
  await press(b)
  report.back = same(before, await state(figure))
  return report
}
