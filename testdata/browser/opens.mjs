// node opens.mjs INDEX: opens the written page INDEX, leaves it alone for a while, then goes to its last chart at
// once, and prints, as JSON, when it was painted first and which charts had started. CHROMIUM names the browser.
import { chromium } from 'playwright-core'
import { pathToFileURL } from 'node:url'
import * as seen from './seen.mjs'

const flags = ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync']
const browser = await chromium.launch({ executablePath: process.env.CHROMIUM, args: flags })
try {
  const page = await browser.newPage({ viewport: { width: 1400, height: 900 } })
  await page.goto('about:blank')
  await page.goto(pathToFileURL(process.argv[2]).href)
  await page.evaluate(() => document.fonts.ready.then(() => true))
  await page.waitForTimeout(1000)
  const report = await page.evaluate(() => ({
    paint: performance.getEntriesByName('first-contentful-paint')[0]?.startTime ?? 0,
    ready: performance.getEntriesByType('navigation')[0].domContentLoadedEventEnd,
  }))
  report.still = await page.evaluate(seen.started)
  await page.evaluate(() => [...document.querySelectorAll('figure[data-chart]')].pop().scrollIntoView({ behavior: 'instant' }))
  await page.waitForFunction(() => [...document.querySelectorAll('figure[data-chart]')].pop().querySelector('.live svg'))
  report.last = await page.evaluate(seen.started)
  console.log(JSON.stringify(report))
} finally {
  await browser.close()
}
