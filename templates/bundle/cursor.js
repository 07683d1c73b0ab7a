// The pointer of a chart moved by key, its values spoken, and the pointers of the
// other charts of the same block that run along the same axis.
const list = (v) => (v === undefined ? [] : Array.isArray(v) ? v : [v])
const all = new Set()

export class Cursor {
  constructor(live) {
    this.live = live
    this.said = document.createElement('span')
    this.said.className = 'sr'
    this.said.setAttribute('aria-live', 'polite')
    live.live.after(this.said)
    this.set = live.figure.dataset.block
    all.add(this)
    live.chart.on('updateAxisPointer', (e) => this.moved(e))
    live.chart.on('globalout', () => this.others((c) => c.hide()))
    live.live.addEventListener('blur', () => this.leave())
  }

  // axis is the axis that the pointer runs along, and the panel of it.
  axis() {
    const { drawn } = this.live
    this.along = drawn.tooltip.axisPointer.axis
    const axis = list(drawn[this.along + 'Axis'])[0]
    return [axis, list(drawn.grid)[axis.gridIndex || 0]]
  }

  // seen is the window of the axis that is shown.
  seen(axis) {
    const [from, to] = list(this.live.drawn.dataZoom).length ? this.live.zoom : [0, 100]
    return [from, to].map((p) => axis.min + ((axis.max - axis.min) * p) / 100)
  }

  // step goes on to the next point of a curve, a hundredth of the window at least.
  step(by) {
    const [axis] = this.axis()
    const k = this.along === 'x' ? 0 : 1
    const [lo, hi] = this.seen(axis)
    const least = (hi - lo) / 100
    const places = []
    for (const s of list(this.live.drawn.series)) {
      if (s.id[0] !== 's' || this.live.off.has(s.name)) continue
      for (let i = k; i < s.data.length; i += 2) if (s.data[i] >= lo && s.data[i] <= hi) places.push(s.data[i])
    }
    if (!places.length) return
    places.sort((a, b) => a - b)
    const last = places.length - 1
    let to
    if (this.at === undefined || this.at < lo || this.at > hi) to = by < 0 && Number.isFinite(by) ? places[last] : places[0]
    else if (by > 0) to = places.find((v) => v >= this.at + least * 0.999) ?? places[last]
    else to = places.findLast((v) => v <= this.at - least * 0.999) ?? places[0]
    if (by === Infinity) to = places[last]
    if (by === -Infinity) to = places[0]
    this.show(to)
    this.at = to
    requestAnimationFrame(() => { this.said.textContent = this.live.drawn.said || '' })
  }

  // show puts the pointer at a place of its axis (of the logarithm where that is drawn).
  show(v) {
    const [axis, grid] = this.axis()
    const [lo, hi] = this.seen(axis)
    const share = (v - lo) / (hi - lo)
    if (!(share > -1e-6 && share < 1 + 1e-6)) return this.hide()
    const within = (s, px) => Math.min(Math.max(s * px, 0.02), px - 0.02) // the frame itself is outside
    const at = this.along === 'x'
      ? { x: grid.left + within(share, grid.width), y: grid.top + grid.height / 2 }
      : { x: grid.left + grid.width / 2, y: grid.top + within(1 - share, grid.height) }
    this.live.chart.dispatchAction({ type: 'showTip', ...at })
  }

  hide() {
    this.live.chart.dispatchAction({ type: 'hideTip' })
    this.live.chart.dispatchAction({ type: 'updateAxisPointer', currTrigger: 'leave' })
  }

  // leave takes the pointer away, here and in the other charts.
  leave() {
    if (this.at === undefined) return
    this.at = undefined
    this.said.textContent = ''
    this.hide()
    this.others((c) => c.hide())
  }

  // moved brings the other charts' pointers to the same value.
  moved(event) {
    if (this.led) return
    const info = list(event.axesInfo)[0]
    if (!info) return
    const [axis] = this.axis()
    if (info.axisDim !== this.along) return
    const value = axis.log ? 10 ** info.value : info.value
    this.others((c, other) => c.show(other.log ? Math.log10(value) : value))
  }

  // others does something with each chart of the block that runs along the same axis.
  others(what) {
    if (!this.set) return
    const [axis] = this.axis()
    for (const c of all) {
      if (c === this || c.set !== this.set || c.live.live.hidden) continue
      const [other] = c.axis()
      if (c.along !== this.along || other.label !== axis.label || other.unit !== axis.unit) continue
      c.led = true
      try { what(c, other) } finally { c.led = false }
    }
  }
}
