// The live page asks its own address what has changed, and keeps its place: what
// stood at the top of the window stands there again.
;(() => {
  const last = location.pathname.endsWith('/last')
  const key = 'quoin ' + location.pathname.replace(/[^/]*$/, '') // both pages keep one place
  const top = () => {
    for (const e of document.querySelectorAll('main [id]')) {
      const box = e.getBoundingClientRect()
      if (box.height > 0 && box.bottom > 0) return { id: e.id, y: box.top, at: scrollY }
    }
    return { at: scrollY }
  }
  const restore = () => {
    const was = JSON.parse(sessionStorage.getItem(key) || 'null')
    if (!was) return
    const e = was.id && document.getElementById(was.id)
    scrollTo({ top: e ? scrollY + e.getBoundingClientRect().top - was.y : was.at, behavior: 'instant' })
  }
  history.scrollRestoration = 'manual'
  if (!broken) restore()
  let moved = false // by the reader; until then the place is held while charts come up
  for (const by of ['wheel', 'touchmove', 'keydown', 'pointerdown']) addEventListener(by, () => { moved = true }, { passive: true })
  for (const ms of [0, 60, 200, 500]) setTimeout(() => moved || broken || restore(), ms)
  const keep = () => sessionStorage.setItem(key, JSON.stringify(top()))
  if (!broken) addEventListener('pagehide', keep) // messages have a place of their own
  const events = new EventSource('events')
  events.onmessage = (e) => {
    const [now, state] = e.data.split(' ')
    if (Number(now) === version) return
    if (last && state === 'broken') return
    if (last) location.replace('./')
    else location.reload()
  }
  if (broken) addEventListener('keydown', (e) => { if (e.key === 'l' && !e.ctrlKey && !e.metaKey && !e.altKey) document.getElementById('last')?.click() })
})()
