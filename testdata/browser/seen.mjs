// What is seen in the page. Each function is sent into the page and stands alone.

// started is the figures by id: how far below the window each lies in px, and whether its chart has started.
export function started() {
  return [...document.querySelectorAll('figure[data-chart]')].map((f) => ({
    id: f.id, below: f.getBoundingClientRect().top - innerHeight, started: f.querySelector('.live svg') !== null,
  }))
}

// outline is the head, the headings, and the links that lead nowhere.
export function outline() {
  const ids = [...document.querySelectorAll('[id]')].map((e) => e.id)
  const here = new Set(ids)
  const links = [...document.querySelectorAll('a[href]')].map((a) => a.getAttribute('href'))
  return {
    policy: document.querySelector('meta[http-equiv="Content-Security-Policy"]')?.content ?? '',
    title: document.title,
    sheets: document.querySelectorAll('.head .sh').length,
    headings: [...document.querySelectorAll('h1, h2, h3, h4, h5, h6')].map((h) => Number(h.tagName[1])),
    inner: links.filter((h) => h.startsWith('#')).length,
    broken: links.filter((h) => h.startsWith('#') && !here.has(decodeURIComponent(h.slice(1)))),
    files: [...new Set(links.filter((h) => !h.startsWith('#') && !/^[a-z]+:/i.test(h)))],
    schemes: [...new Set(links.map((h) => /^[a-z]+:/i.exec(h)?.[0].toLowerCase()).filter(Boolean))],
    twice: ids.filter((id, i) => ids.indexOf(id) !== i),
    strange: [...document.querySelectorAll('iframe, object, embed, form, base, link, animate, main img:not([src^="data:image/"]), main style, svg script')].map((e) => e.outerHTML.slice(0, 120)),
    handlers: [...document.querySelectorAll('*')].flatMap((e) => [...e.attributes].filter((a) => a.name.startsWith('on')).map((a) => `${e.tagName} ${a.name}`)),
  }
}

// texts is every piece of text that has a place on the page, outside the charts.
export function texts() {
  const out = []
  const walk = document.createTreeWalker(document.body, NodeFilter.SHOW_TEXT)
  for (let n; (n = walk.nextNode()); ) {
    const text = n.data.trim()
    if (!text || n.parentElement.closest('script, .live, .twin, .tools')) continue
    const range = document.createRange()
    range.selectNodeContents(n)
    const box = range.getBoundingClientRect()
    const e = n.parentElement
    if (box.width > 0 && box.height > 0 && getComputedStyle(e).visibility === 'visible') out.push(text)
  }
  return out
}

// parts counts figures, equations and tables, and names those without a size.
export function parts() {
  for (const d of document.querySelectorAll('details')) d.open = true
  const sized = (e) => { const b = e?.getBoundingClientRect(); return Boolean(b) && b.width > 1 && b.height > 1 }
  const name = (e) => `${e.closest('[id]')?.id}: ${e.textContent.trim().slice(0, 60)}`
  const all = (selector) => [...document.querySelectorAll('main ' + selector)]
  return {
    figures: all('figure').length, equations: all('math').length, tables: all('table').length, images: all('img').length, values: all('details.values').length,
    dead: all('button, input, select, [role=button], [aria-pressed], [aria-expanded], .live[tabindex]').filter(sized).map((e) => `${e.tagName} ${name(e)}`),
    unseen: [
      ...all('figure').filter((f) => [...f.querySelectorAll('.twin svg')].filter(sized).length !== 1).map((f) => 'figure ' + f.id),
      ...all('figure').filter((f) => sized(f.querySelector('.live'))).map((f) => 'empty chart in ' + f.id),
      ...all('math').filter((m) => !sized(m)).map((m) => 'math ' + name(m)),
      ...all('figure').filter((f) => f.querySelector('[type="application/json"]') && !sized(f.closest('.part').querySelector('details.values table'))).map((f) => 'the values of figure ' + f.id),
      ...all('table').filter((t) => !sized(t)).map((t) => 'table ' + name(t)),
      ...all('img').filter((i) => !sized(i) || i.naturalWidth === 0).map((i) => 'image ' + i.alt),
      ...all('.line').filter((l) => !l.querySelector('math')).map((l) => 'line without math ' + name(l)),
    ],
  }
}

// paper counts what stands for the figures.
export function paper() {
  const shown = (e) => e !== null && e.getClientRects().length > 0 && e.getBoundingClientRect().height > 20
  const list = [...document.querySelectorAll('figure[data-chart]')]
  return {
    figures: list.length,
    twins: list.filter((f) => [...f.querySelectorAll('.twin svg')].filter(shown).length === 1).length,
    lives: list.filter((f) => shown(f.querySelector('.live'))).length,
    tools: [...document.querySelectorAll('.tools')].filter((e) => e.getClientRects().length > 0).length,
  }
}

// widths is what goes beyond the window, and whether what is too wide scrolls in its own box.
export function widths() {
  const root = document.scrollingElement
  const scrolls = (e) => ['auto', 'scroll'].includes(getComputedStyle(e).overflowX)
  const boxed = (e) => { for (let p = e; p && p !== document.body; p = p.parentElement) if (scrolls(p)) return true; return false }
  const name = (e) => `${e.tagName.toLowerCase()}.${e.className?.baseVal ?? e.className} in #${e.closest('[id]')?.id}: ${e.textContent.trim().slice(0, 50)}`
  const beyond = [...document.querySelectorAll('main *')].filter((e) => e.getBoundingClientRect().right > innerWidth + 1 && !boxed(e) && !e.closest('svg svg, .skip, .sr'))
  const wide = [...document.querySelectorAll('main table')].filter((t) => t.parentElement.scrollWidth > t.parentElement.clientWidth + 1)
  // Cut off: inside a box that hides what is too wide.
  const cut = [...document.querySelectorAll('main *')].filter((e) => e.scrollWidth > e.clientWidth + 1 && e.clientWidth > 1 && ['hidden', 'clip'].includes(getComputedStyle(e).overflowX) && !e.closest('svg, .live, math'))
  return {
    scroll: root.scrollWidth, inner: innerWidth, beyond: beyond.slice(0, 10).map(name), wide: wide.length,
    stuck: wide.filter((t) => !boxed(t.parentElement)).map(name), cut: cut.slice(0, 10).map(name),
    // The sheets' heads must leave room for the sheet.
    head: Math.max(...[...document.querySelectorAll('.head')].map((h) => h.getBoundingClientRect().height)),
  }
}

// rules runs the rules of the tags, on the whole page or a part of it. It needs the rules in the page.
export async function rules({ tags, part }) {
  const result = await window.axe.run(part ?? document, { runOnly: tags, resultTypes: ['violations'] })
  return {
    passed: result.passes.length, targets: result.passes.some((r) => r.id === 'target-size'),
    broken: result.violations.map((v) => ({ rule: v.id, help: v.help, count: v.nodes.length, at: v.nodes.slice(0, 4).map((n) => `${n.target.join(' ')} ${n.html.slice(0, 120)} ${n.any.map((a) => a.message).join(' ')}`) })),
  }
}
