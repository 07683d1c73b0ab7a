// A number that leads home says on a card, by pointer or by key, how it was made: its
// symbol, the expression and the numbers in it, the line of the source, and all that it
// depends on, down to the inputs. Each value is told once, in the page's template
// q-trail; a card is put together from there and from the equation's own line.
const element = (name, text, kind) => {
  const e = document.createElement(name)
  if (text) e.textContent = text
  if (kind) e.className = kind
  return e
}

const plural = (n, word) => `${n} ${word}${n === 1 ? '' : 's'}`

// copy is a part of the page to stand elsewhere as well.
function copy(part) {
  const c = part.cloneNode(true)
  for (const e of [c, ...c.querySelectorAll('*')]) for (const a of ['id', 'tabindex', 'data-v']) e.removeAttribute(a)
  return c
}

// scrolling is a box for what may be wider than the card, to be scrolled by key as well.
function scrolling() {
  const box = element('div', '', 'ce')
  box.tabIndex = 0
  return box
}

class Card {
  constructor(steps) {
    this.steps = steps
    this.link = null // whose card is open
    this.left = null // whose card was closed by Escape; it stays closed until left
    this.box = element('div', '', 'card')
    this.box.id = 'q-card'
    this.box.setAttribute('role', 'group')
    if (this.box.showPopover) this.box.popover = 'manual' // above all, and cut by no box that scrolls

    const number = (e) => (this.box.contains(e.target) ? null : e.target.closest?.('a[data-v]'))
    const within = (e) => Boolean(e) && (this.box.contains(e) || this.link?.contains(e))
    addEventListener('pointerover', (e) => {
      if (e.pointerType === 'touch') return
      const link = number(e)
      if (link !== this.left) this.left = null
      if (within(e.target)) this.wait()
      else if (link) this.wait(() => this.show(link), 120)
      else if (!within(document.activeElement)) this.wait(() => this.hide(), 300)
    })
    addEventListener('focusin', (e) => {
      const link = number(e)
      if (link && link.matches(':focus-visible')) this.show(link)
      else if (!within(e.target)) this.hide()
    })
    addEventListener('focusout', (e) => {
      if (e.target === this.left) this.left = null
      if (!e.relatedTarget && within(e.target) && !this.box.matches(':hover')) this.wait(() => within(document.activeElement) || this.hide(), 0)
    })
    addEventListener('keydown', (e) => {
      if (e.key !== 'Escape' || !this.link) return
      const link = this.link
      if (this.box.contains(document.activeElement)) link.focus()
      this.hide()
      this.left = link
    })
    addEventListener('click', (e) => { if (e.target.closest?.('a')) this.hide() })
    this.box.addEventListener('toggle', (e) => { if (e.target !== this.box && this.link) this.place() }, true) // it grows
    addEventListener('beforeprint', () => this.hide())
    addEventListener('resize', () => this.hide())
  }

  // wait does something a little later, in place of what was waited for.
  wait(then, ms) {
    clearTimeout(this.timer)
    if (then) this.timer = setTimeout(then, ms)
  }

  show(link) {
    this.wait()
    if (link === this.link || link === this.left) return
    this.hide()
    if (!this.fill(link)) return
    this.link = link
    link.removeAttribute('title') // the card says it better
    link.after(this.box) // so that Tab goes from the number into its card
    link.setAttribute('aria-details', this.box.id)
    this.box.showPopover?.()
    this.place()
  }

  // place puts the card at its number: below, where there is room, and within the window.
  place() {
    const at = this.link.getClientRects()[0], box = this.box.getBoundingClientRect()
    const below = at.bottom + box.height < innerHeight || at.top < box.height
    this.box.style.left = `${Math.max(8, Math.min(at.left - 12, document.documentElement.clientWidth - box.width - 8)) + scrollX}px`
    this.box.style.top = `${(below ? at.bottom + 2 : at.top - box.height - 2) + scrollY}px`
  }

  hide() {
    this.wait()
    if (!this.link) return
    this.link.removeAttribute('aria-details')
    this.link = null
    this.box.remove()
  }

  from(n) { return (this.steps[n - 1].dataset.from || '').split(' ').filter(Boolean).map(Number) }

  // called is a value by its symbol, or by its name.
  called(step) {
    const math = step.querySelector('math')
    return math ? math.cloneNode(true) : element('b', step.dataset.name)
  }

  // value is the number that the link is, with its unit; of a vector, the item.
  value(link, step) {
    const whole = step.querySelector('b')?.textContent
    const [many, unit] = whole?.match(/^\d+ values, (.*)/) || []
    if (!whole || (many && !link.matches('.from a, a.eqno'))) {
      const text = link.textContent
      return unit && unit !== 'pure numbers' && !text.includes(unit) ? `${text}\u202f${unit}` : text
    }
    return whole
  }

  fill(link) {
    const n = Number(link.dataset.v), step = this.steps[n - 1]
    if (!step) return false
    const home = document.getElementById(decodeURIComponent(link.hash.slice(1))) // an item may have an equation of its own
    const own = link.matches('a.eqno') // the card of an equation beside the equation
    const box = this.box
    box.replaceChildren()
    box.style.left = box.style.top = '0'
    box.setAttribute('aria-label', `Where ${step.dataset.name} comes from`)

    const head = element('p', '', 'ch')
    const value = this.value(link, step)
    head.append(this.called(step))
    if (value) head.append(step.querySelector('math') ? ' = ' : ' ', element('b', value))
    box.append(head)
    if (home?.matches('.line') && !own) {
      const parts = ['.eq', '.num'].map((part) => home.querySelector(part)).filter(Boolean)
      if (parts.length > 1 || home.querySelector('.eq math')?.getAttribute('alttext') !== step.querySelector('math')?.getAttribute('alttext')) {
        const set = scrolling()
        set.append(...parts.map(copy))
        box.append(set)
      }
    }
    if (step.dataset.was) box.append(element('p', step.dataset.was, 'cw'))
    const numbers = step.querySelector('.num')
    if (numbers) {
      const set = scrolling()
      set.append(copy(numbers))
      box.append(set)
    }
    const doc = step.querySelector('i')
    if (doc) box.append(element('p', doc.textContent, 'cd'))

    const place = element('p', '', 'cp')
    place.append(step.dataset.at)
    if (step.dataset.made) place.append(' · ' + step.dataset.made)
    const sheet = home?.closest('.sheet')
    if (home && !own) {
      const to = element('a', [home.querySelector('.eqno')?.textContent.replace(/^/, 'Eq. '), sheet && 'sheet ' + sheet.id.replace('sheet-', '')].filter(Boolean).join(', '))
      to.href = '#' + home.id
      place.append(' · ', to)
    }
    box.append(place)
    box.append(this.trail(n, step))
    return true
  }

  // trail is all that a value depends on, each named once, below what needs it first.
  trail(n, step) {
    const rows = [], seen = new Set([n])
    const walk = (i, depth) => {
      for (const j of this.from(i)) {
        if (seen.has(j)) continue
        seen.add(j)
        rows.push([j, depth])
        walk(j, depth + 1)
      }
    }
    walk(n, 0)
    if (!rows.length) return element('p', step.dataset.reads ? 'Read from ' + step.dataset.reads : 'An input: it depends on no other value.', 'cp')
    const inputs = rows.filter(([j]) => !this.from(j).length).length
    const all = element('details')
    all.append(element('summary', `Depends on ${rows.length}, ${plural(inputs, 'input')} among them`))
    const list = element('ol')
    for (const [j, depth] of rows) {
      const s = this.steps[j - 1], row = element('li')
      row.style.marginLeft = Math.min(depth, 7) * 0.9 + 'em'
      row.append(this.called(s))
      const value = s.querySelector('b')?.textContent
      if (value) row.append(s.querySelector('math') ? ' = ' : ' ', value)
      const to = element('a', s.dataset.at)
      to.href = '#' + s.dataset.to
      const notes = [s.dataset.made, this.from(j).length ? '' : s.dataset.reads ? 'from ' + s.dataset.reads : 'input']
      const small = element('small', ' ')
      small.append(to, notes.filter(Boolean).map((n) => ' · ' + n).join(''))
      row.append(small)
      list.append(row)
    }
    all.append(list)
    return all
  }
}

const store = document.getElementById('q-trail')
if (store) new Card([...store.content.children])
