// A page that is listened to while it is used.
import { pathToFileURL } from 'node:url'

// open opens the file in a window of its own. heard fills with what the page asks for, says and refuses.
export async function open(browser, file, options = {}) {
  const context = await browser.newContext({ viewport: { width: 1400, height: 900 }, ...options })
  context.setDefaultTimeout(40_000)
  const page = await context.newPage()
  const address = pathToFileURL(file).href
  const heard = { requests: [], data: [], console: [], errors: [], dialogs: [], violations: [] }
  const wire = await context.newCDPSession(page)
  await wire.send('Network.enable')
  wire.on('Network.requestWillBeSent', ({ request: { url } }) => {
    if (url.startsWith('data:')) heard.data.push(url.slice(5, 30))
    else if (url !== address) heard.requests.push(url)
  })
  page.on('console', (m) => { if (['error', 'warning'].includes(m.type())) heard.console.push(m.text()) })
  page.on('pageerror', (e) => heard.errors.push(String(e.stack || e)))
  page.on('popup', (p) => heard.errors.push('a second window: ' + p.url()))
  page.on('dialog', (d) => { heard.dialogs.push(d.message()); d.dismiss() })
  page.on('framenavigated', (f) => { if (f.url() !== address) heard.requests.push('went to ' + f.url()) })
  await page.exposeFunction('refused', (v) => { heard.violations.push(v) })
  await page.addInitScript(() => {
    addEventListener('securitypolicyviolation', (e) => window.refused(`${e.violatedDirective} ${e.blockedURI} ${e.sample}`), true)
  })
  await page.goto(address)
  await page.evaluate(() => document.fonts.ready.then(() => true))
  return { page, heard, close: () => context.close() }
}

// settle waits until the page has drawn what it was told.
export const settle = (page) => page.evaluate(() => new Promise((done) => requestAnimationFrame(() => requestAnimationFrame(() => done(true)))))

// leaf scrolls through the page to its end and back, and waits until every chart has started.
export async function leaf(page) {
  const high = await page.evaluate(() => document.documentElement.scrollHeight)
  for (let y = 0; y < high; y += 800) {
    await page.evaluate((to) => scrollTo({ top: to, behavior: 'instant' }), y)
    await settle(page)
    await page.waitForFunction(() => [...document.querySelectorAll('figure[data-chart]')].every((f) => f.querySelector('.live svg') || f.getBoundingClientRect().top >= innerHeight || f.getBoundingClientRect().bottom <= 0))
  }
  await page.evaluate(() => scrollTo({ top: 0, behavior: 'instant' }))
  await settle(page)
}

// fonts gives the faces that letters of an element are really drawn with.
export async function fonts(page) {
  const wire = await page.context().newCDPSession(page)
  await wire.send('DOM.enable')
  await wire.send('CSS.enable')
  const { root } = await wire.send('DOM.getDocument')
  const drawn = {}
  for (const [name, selector] of [['Text', 'p'], ['Label', '.head .sh'], ['Math', 'math :is(mi, mn, mo)']]) {
    const { nodeIds } = await wire.send('DOM.querySelectorAll', { nodeId: root.nodeId, selector: `main ${selector}` })
    let own = 0, other = 0
    for (const nodeId of nodeIds.slice(0, 60)) {
      const { fonts } = await wire.send('CSS.getPlatformFontsForNode', { nodeId })
      for (const f of fonts) f.isCustomFont ? (own += f.glyphCount) : (other += f.glyphCount)
    }
    const loaded = await page.evaluate((n) => [...document.fonts].some((f) => f.family.replaceAll('"', '') === n && f.status === 'loaded') && document.fonts.check(`16px "${n}"`), name)
    drawn[name] = { loaded, own, other }
  }
  return drawn
}
