// The numbers that lead home, followed by pointer and by key.
import { tags } from './states.mjs'
import { settle } from './watch.mjs'

const pause = (page, ms) => page.waitForTimeout(ms)

// card is the open card, in words.
const card = (page) => page.evaluate(() => {
  const box = document.querySelector('.card')
  const at = box?.getBoundingClientRect()
  return box && { words: box.textContent, name: box.getAttribute('aria-label'), inside: at.left >= 0 && at.right <= innerWidth, items: box.querySelectorAll('li').length }
})

export async function homes(page, rules) {
  const report = { ...(await page.evaluate(lead)), tried: [] }
  for (const where of ['p a.v', 'table:not(.checks) a.o', '.checks a.o', '.from a', 'a.eqno']) {
    const link = (await page.$$(`main :is(${where})[data-v]`))[0]
    if (link) report.tried.push({ where, ...(await use(page, link)) })
  }
  // One with a trail, opened, under the rules of accessibility.
  for (const link of await page.$$('main p a.v[data-v]')) {
    await link.focus()
    await settle(page)
    if (!(await page.$('.card summary'))) continue
    await page.focus('.card summary')
    await page.keyboard.press('Enter')
    await settle(page)
    report.trail = await card(page)
    report.rules = await page.evaluate(rules, { tags })
    await page.keyboard.press('Escape')
    break
  }
  return report
}

// lead is where each number leads, and what is wrong with it: a card that is not there, or a place that
// is not that of the value.
function lead() {
  const steps = [...document.getElementById('q-trail').content.children]
  const links = [...document.querySelectorAll('a[data-v]')]
  const wrong = []
  const plain = (s) => s.replace(/\[.*/, '')
  for (const a of links) {
    const step = steps[a.dataset.v - 1], to = document.getElementById(decodeURIComponent(a.hash.slice(1)))
    const name = step?.dataset.name
    const block = name?.split('.')[0], own = name?.split('.').pop()
    let right = false
    if (to?.matches('.line')) right = to.id.replace(/-\d+-$/, '') === 'eq-' + name || plain(to.querySelector('math').getAttribute('alttext').split(' ')[0]) === own
    else if (to?.matches('.bh')) right = to.querySelector('b')?.textContent.replaceAll('Ω', 'Omega') === block
    else if (to?.matches('.checks tr')) right = step.querySelector('.num') !== null || /[-+*/^(\[×·]/.test(name)
    if (!right) wrong.push(`${a.textContent} (${name}) leads to ${to?.tagName}.${to?.className} #${a.hash}`)
  }
  for (const s of steps) {
    if (!/:\d+$/.test(s.dataset.at)) wrong.push(`${s.dataset.name} has no line: ${s.dataset.at}`)
    for (const n of (s.dataset.from || '').split(' ').filter(Boolean)) if (!steps[n - 1]) wrong.push(`${s.dataset.name} depends on nothing`)
  }
  const names = steps.map((s) => s.dataset.name)
  return { links: links.length, steps: steps.length, wrong: wrong.slice(0, 20), twice: names.filter((n, i) => names.indexOf(n) !== i) }
}

// use opens the card of a number by pointer, goes into it, leaves it; then by key.
async function use(page, link) {
  const out = {}
  await page.mouse.move(0, 0)
  await link.evaluate((e) => e.scrollIntoView({ block: 'center', behavior: 'instant' }))
  await settle(page)
  await link.hover()
  await pause(page, 300)
  out.hover = await card(page)
  const box = await (await page.$('.card'))?.boundingBox()
  if (box) {
    await page.mouse.move(box.x + box.width / 2, box.y + 12, { steps: 4 })
    await pause(page, 500)
    out.held = (await card(page)) !== null
    await page.mouse.move(2, 2)
    await pause(page, 500)
    out.left = (await card(page)) === null
  }
  await page.keyboard.press('Shift') // from here on by key
  await link.focus()
  await settle(page)
  out.focus = await card(page)
  await page.keyboard.press('Tab')
  await settle(page)
  out.within = await page.evaluate(() => document.querySelector('.card')?.contains(document.activeElement) ?? false)
  await page.keyboard.press('Escape')
  out.escaped = (await card(page)) === null
  out.back = await link.evaluate((e) => e === document.activeElement)
  await page.evaluate(() => document.activeElement.blur())
  return out
}
