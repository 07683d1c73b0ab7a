// Looks at a live page: does it keep its place when the document is saved above it,
// while the source is broken, and after? Prints what it saw as JSON.
import { readFileSync, writeFileSync } from 'node:fs'
import { chromium } from 'playwright-core'

const [address, file] = process.argv.slice(2)
const text = readFileSync(file, 'utf8')
const browser = await chromium.launch({ executablePath: process.env.CHROMIUM, args: ['--no-sandbox', '--disable-gpu', '--disable-quic'] })
try {
  const page = await browser.newPage({ viewport: { width: 1200, height: 800 } })
  const said = []
  page.on('console', (m) => said.push(m.text()))
  page.on('pageerror', (e) => said.push(e.message))
  await page.goto(address)
  await page.waitForFunction(() => document.querySelectorAll('math').length > 5)
  const where = () => page.evaluate(() => Math.round(document.getElementById('b-frame').getBoundingClientRect().top))
  const holds = async (want) => { // the page that holds a text, come to rest
    await page.waitForFunction((w) => document.readyState === 'complete' && document.body.textContent.includes(w), want)
    await page.waitForTimeout(1500)
  }
  await page.evaluate(() => scrollBy(0, document.getElementById('b-frame').getBoundingClientRect().top - 120))
  await page.waitForTimeout(1500)
  const start = await where()
  writeFileSync(file, text.replace('# Purpose and scope', '# Purpose and scope\n\nA first remark.\n\nA second remark, one above the other.'))
  await holds('A second remark')
  const after = await where()
  writeFileSync(file, text.replace('calc structure frame', 'calc struktur frame'))
  await holds('there is no block kind struktur')
  const messages = await page.locator('pre').textContent()
  await page.keyboard.press('l')
  await holds('A second remark')
  const last = page.url()
  writeFileSync(file, text)
  await holds('Purpose and scope')
  await page.waitForFunction(() => !document.body.textContent.includes('A second remark'))
  await page.waitForTimeout(1500)
  const again = await where()
  await page.locator('figure[data-chart]').first().scrollIntoViewIfNeeded()
  await page.waitForSelector('.live svg')
  console.log(JSON.stringify({ Start: start, After: after, Again: again, Messages: messages, Last: last, Charts: await page.locator('.live svg').count(), Said: said }))
} finally {
  await browser.close()
}
