// node page.mjs INDEX FOLDER MODE...: opens the written page INDEX as a reader would and prints, as JSON,
// what was seen in each mode. It judges nothing. FOLDER takes page.pdf; CHROMIUM names the browser.
//
//   live      as it opens, then leafed through to its end: what it asks for, says and refuses; links, headings,
//             faces; the accessibility rules of WCAG 2.0 to 2.2, A and AA; every chart and the numbers that lead home by pointer and by key, and
//             what stands in its place on paper; page.pdf; at 390 and 320 px
//   glance    the accessibility rules and the widths at the sizes of a screen, of a phone and at 200 %, and in the states
//             that the page takes; what can have the focus; the elements and attributes of the page
//   open      leafed through, then at 390 and 320 px
//   plain     without scripts, also at 390 and 320 px
import { readFileSync } from 'node:fs'
import { createRequire } from 'node:module'
import { chromium } from 'playwright-core'
import { figures } from './figures.mjs'
import { homes } from './homes.mjs'
import * as seen from './seen.mjs'
import { glance, tags } from './states.mjs'
import { fonts, leaf, open, settle } from './watch.mjs'

const [index, folder, ...modes] = process.argv.slice(2)
const flags = ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync']

const does = {
  async live(page) {
    const report = { early: await page.evaluate(seen.started) }
    await leaf(page)
    report.late = await page.evaluate(seen.started)
    Object.assign(report, await page.evaluate(seen.outline), { fonts: await fonts(page), texts: await page.evaluate(seen.texts) })

    await axe(page)
    await page.evaluate(() => document.querySelectorAll('details').forEach((d) => { d.open = true }))
    report.rules = await page.evaluate(seen.rules, { tags })
    await page.evaluate(() => document.querySelectorAll('details').forEach((d) => { d.open = false }))

    report.homes = await homes(page, seen.rules)
    report.figures = await figures(page)
    for (const [media, name] of [['print', 'paper'], [null, 'back']]) {
      await page.emulateMedia({ media })
      await settle(page)
      report[name] = await page.evaluate(seen.paper)
    }
    await page.pdf({ path: folder + '/page.pdf', preferCSSPageSize: true })
    report.widths = await narrow(page, true)
    return report
  },

  async glance(page) {
    await axe(page)
    return { ...(await page.evaluate(seen.outline)), texts: await page.evaluate(seen.texts), ...(await glance(page, seen)) }
  },

  async open(page) {
    await leaf(page)
    return { ...(await page.evaluate(seen.outline)), texts: await page.evaluate(seen.texts), widths: await narrow(page, true) }
  },

  async plain(page) {
    const texts = await page.evaluate(seen.texts)
    return { texts, ...(await page.evaluate(seen.parts)), widths: await narrow(page, false) }
  },
}

// axe puts the rules of accessibility into the page.
const axe = (page) => page.evaluate(readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8'))

// narrow is the page at the widths of phones. Without scripts nothing is drawn anew.
async function narrow(page, drawn) {
  const report = []
  for (const width of [390, 320]) {
    await page.setViewportSize({ width, height: 844 })
    if (drawn) await settle(page)
    report.push({ width, ...(await page.evaluate(seen.widths)) })
  }
  return report
}

const browser = await chromium.launch({ executablePath: process.env.CHROMIUM, args: flags })
try {
  const report = {}
  for (const mode of modes) {
    const { page, heard, close } = await open(browser, index, { javaScriptEnabled: mode !== 'plain' })
    report[mode] = { ...(await does[mode](page)), heard }
    await close()
  }
  console.log(JSON.stringify(report))
} finally {
  await browser.close()
}
