// The page as it is met: at the widths of a screen, a phone and a screen at twice its size, and in the states it takes.
import { leaf, settle } from './watch.mjs'

// sizes are what is looked at: CSS pixels across, device pixels a CSS pixel. 700 at 2 is a window of 1400 at 200 %.
const sizes = [[1400, 1], [700, 2], [390, 1]]
export const tags = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa']

// glance gives, by size, what the rules of accessibility say and what is too wide, with every table of values open;
// then the same of the states. It needs the rules in the page.
export async function glance(page, seen) {
  await leaf(page)
  const wire = await page.context().newCDPSession(page)
  const report = { sizes: [], states: [] }
  const resize = async (width, deviceScaleFactor) => {
    await wire.send('Emulation.setDeviceMetricsOverride', { width, height: 900, deviceScaleFactor, mobile: false })
    await settle(page)
    await page.waitForFunction(() => [...document.querySelectorAll('.live svg')].every((s) => s.getBoundingClientRect().right <= innerWidth + 1))
  }
  await page.evaluate(() => document.querySelectorAll('details').forEach((d) => { d.open = true }))
  for (const [width, ratio] of sizes) {
    await resize(width, ratio)
    report.sizes.push({ rules: await page.evaluate(seen.rules, { tags }), ...(await page.evaluate(seen.widths)), width, ratio })
    if (width >= 700) continue
    report.states.push(...(await states(page, seen, width)))
  }
  await resize(1400, 1)
  report.states.push(...(await states(page, seen, 1400)))
  await page.keyboard.press('Shift') // from here on by key
  report.focus = await page.evaluate(focus)
  await wire.detach()
  return report
}

// states uses the switches of the figure that has the most of them, then opens a card and what it depends on, and looks
// at the sheet while it is so.
async function states(page, seen, width) {
  const out = []
  const look = async (state, on) => {
    await settle(page)
    await on.evaluate((e) => { for (const o of document.querySelectorAll('[data-seen]')) delete o.dataset.seen; e.closest('.sheet').dataset.seen = '' })
    const { scroll, inner } = await page.evaluate(seen.widths)
    out.push({ state, width, rules: await page.evaluate(seen.rules, { tags, part: '[data-seen]' }), scroll, inner })
  }
  const figure = (await page.evaluateHandle(() => [...document.querySelectorAll('figure[data-chart]')].reduce((a, f) => (f.querySelectorAll('button').length > (a?.querySelectorAll('button').length ?? 0) ? f : a), null))).asElement()
  if (figure) {
    const press = async (...names) => {
      for (const b of await figure.$$('.tools button')) {
        if (names.includes(await b.textContent()) && (await b.isVisible())) return b.press('Enter')
      }
    }
    for (const name of ['linear', 'curves', 'zoom', '+', 'save']) await press(name)
    await (await figure.$('.live')).press('End')
    await look('a chart in use', figure)
    await page.keyboard.press('Escape')
    for (const name of ['save', 'reset', 'zoom', 'curves', 'log']) await press(name)
  }
  for (const link of await page.$$('main p a.v[data-v]')) {
    await page.keyboard.press('Shift')
    await link.focus()
    await settle(page)
    if (!(await page.$('.card summary'))) continue
    await page.focus('.card summary')
    await page.keyboard.press('Enter')
    await look('a card open', link)
    await page.keyboard.press('Escape')
    break
  }
  return out
}

// focus goes to everything that takes it, and tells what shows no ring, or lies behind something else.
async function focus() {
  const hidden = [], plain = []
  const name = (e) => `${e.tagName.toLowerCase()}.${e.className} "${e.textContent.trim().slice(0, 40)}" in #${e.closest('[id]')?.id}`
  const all = [...document.querySelectorAll('a[href], button, summary, [tabindex="0"]')].filter((e) => e.getClientRects().length > 0)
  for (const e of all) {
    e.focus({ focusVisible: true })
    const style = getComputedStyle(e), ring = parseFloat(style.outlineWidth)
    if (!e.matches(':focus-visible') || style.outlineStyle === 'none' || !(ring >= 2)) plain.push(name(e))
    const boxes = [...e.getClientRects()].filter((b) => b.width > 0 && b.height > 0)
    const onTop = boxes.some((b) => [0.1, 0.5, 0.9].some((part) => {
      const x = Math.min(Math.max(b.left + b.width / 2, 0), innerWidth - 1), y = Math.min(Math.max(b.top + b.height * part, 0), innerHeight - 1)
      const top = document.elementFromPoint(x, y)
      return top && (e.contains(top) || top.contains(e))
    }))
    if (!onTop) hidden.push(name(e))
    const card = document.querySelector('.card')?.getBoundingClientRect()
    if (card && boxes.every((b) => b.right > card.left && b.left < card.right && b.bottom > card.top + 1 && b.top < card.bottom - 1)) hidden.push('under its card: ' + name(e))
  }
  document.activeElement?.blur()
  return { count: all.length, plain: plain.slice(0, 10), hidden: hidden.slice(0, 10) }
}
