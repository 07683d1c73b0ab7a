// One figure as a chart to work with: values at the pointer, zoom, curves on and
// off, logarithmic or linear axes; all of it also from the keyboard.
import { echarts } from './charts.js'
import { Cursor } from './cursor.js'
import { respread } from './ends.js'
import { unpack } from './packed.js'
import { mark, prepare, setTooltip } from './prepare.js'
import { data, picture, save } from './save.js'
import { tooltip } from './tip.js'

setTooltip(tooltip)

const list = (v) => (v === undefined ? [] : Array.isArray(v) ? v : [v])

let hints = 0

export class Live {
  constructor(figure) {
    this.figure = figure
    const [, name] = /([^/]+)\.csv$/.exec(figure.querySelector('figcaption a')?.getAttribute('href') || '') || []
    this.name = name ? decodeURIComponent(name) : 'figure'
    this.twin = figure.querySelector('.twin')
    this.live = figure.querySelector('.live')
    this.text = figure.querySelector('script[type="application/json"]').textContent
    const option = this.option()
    this.linear = false
    this.off = new Set()
    this.zoom = [0, 100]
    this.slider = false
    this.height = Number(figure.dataset.height)

    this.live.hidden = false
    this.live.style.height = this.height + 'px'
    const words = this.twin.querySelector('desc')
    this.live.setAttribute('role', 'application') // arrow keys are the chart's
    this.live.setAttribute('aria-roledescription', 'chart')
    this.live.setAttribute('aria-label', words ? words.textContent : '')
    this.live.tabIndex = 0
    this.width = this.live.clientWidth
    this.chart = echarts.init(this.live, null, { renderer: 'svg', width: this.width, height: this.height })
    this.draw()
    this.twin.hidden = true
    this.cursor = new Cursor(this)
    this.controls(option)
    this.keys(list(option.dataZoom).length > 0, option.thinned)

    this.chart.on('datazoom', () => this.zoomed())
    new ResizeObserver(() => {
      const width = this.live.clientWidth
      if (!width || width === this.width) return
      this.width = width
      this.draw()
    }).observe(this.live)
  }

  // option is the option as it is written, its points to work with.
  option() {
    return unpack(JSON.parse(this.text))
  }

  // paper shows the static picture instead of the chart, for printing.
  paper(on) {
    this.twin.hidden = !on
    this.live.hidden = on
  }

  // draw makes the whole drawing from the option and the state.
  draw() {
    const option = this.option()
    if (this.linear) {
      for (const axis of this.switched(option)) {
        axis.type = 'value'
        if (axis.min > 0) axis.min = 0
      }
    }
    const height = this.height + (this.slider ? 46 : 0)
    this.live.style.height = height + 'px'
    prepare(option, this.width)
    if (this.off.size || this.linear) respread(option, this.off)
    const zoom = list(option.dataZoom)[0]
    if (zoom) {
      Object.assign(zoom, { start: this.zoom[0], end: this.zoom[1] })
      if (this.slider) option.dataZoom = [zoom, this.sliderOf(option, zoom, height)]
    }
    if (option.legend) option.legend.selected = Object.fromEntries([...this.off].map((n) => [n, false]))
    this.drawn = option
    this.chart.resize({ width: this.width, height })
    this.chart.setOption(option, true)
    if (zoom) this.zoomed()
  }

  sliderOf(option, zoom, height) {
    const grid = list(option.grid)[0]
    return {
      type: 'slider', xAxisIndex: zoom.xAxisIndex, filterMode: 'none', start: zoom.start, end: zoom.end,
      left: grid.left, width: grid.width, top: height - 40, height: 24, showDetail: false, showDataShadow: false, brushSelect: false,
      borderColor: '#c9c3b6', backgroundColor: '#fffdf8', fillerColor: '#1d5a6c22', moveHandleSize: 0,
      handleStyle: { color: '#fffdf8', borderColor: '#1c1b19' },
    }
  }

  // zoomed gives the zoomed axes ticks that suit what is seen.
  zoomed() {
    const model = this.chart.getModel().getComponent('dataZoom', 0)
    if (!model) return
    const range = model.getPercentRange()
    const whole = range[0] <= 0.01 && range[1] >= 99.99
    const marks = list(this.drawn.xAxis).map((axis) => {
      const seen = range.map((p) => axis.min + ((axis.max - axis.min) * p) / 100)
      const window = axis.log ? seen.map((v) => Number(Math.pow(10, v).toPrecision(12))) : seen
      mark(axis, list(this.drawn.grid)[axis.gridIndex || 0].width, 56, window)
      return { axisTick: axis.axisTick, axisLabel: axis.axisLabel }
    })
    // The names at the ends of curves belong to the whole; the values at the pointer name them too.
    const names = list(this.drawn.series).filter((s) => s.id.startsWith('~end')).map((s) => ({ id: s.id, label: { show: whole } }))
    if (!whole || !this.whole) this.chart.setOption({ xAxis: marks, series: names })
    this.zoom = range
    this.whole = whole
    if (this.reset) this.reset.hidden = whole
  }

  // magnify zooms about the middle: factor < 1 shows less.
  magnify(factor, shift = 0) {
    const [from, to] = this.zoom
    const half = Math.min(50, Math.max(0.25, ((to - from) / 2) * factor))
    const mid = Math.min(100 - half, Math.max(half, (from + to) / 2 + shift * (to - from)))
    this.chart.dispatchAction({ type: 'dataZoom', dataZoomIndex: 0, start: mid - half, end: mid + half })
  }

  // switched is the axes that the switch is about.
  switched(option) {
    if (option.fixed) return []
    const named = this.figure.dataset.switch
    const axes = [...list(option.xAxis).map((a) => ['x', a]), ...list(option.yAxis).map((a) => ['y', a])]
    return axes.filter(([which, a]) => a.type === 'log' && (!named || named.includes(which))).map(([, a]) => a)
  }

  controls(option) {
    const tools = this.figure.querySelector('.tools')
    if (!tools) return
    const button = (text, title, press, parent = tools) => {
      const b = document.createElement('button')
      b.type = 'button'
      b.textContent = text
      b.title = title
      b.addEventListener('click', () => press(b))
      parent.append(b)
      return b
    }
    if (this.switched(option).length) {
      const b = button('linear', 'Show linear axes', () => {
        this.linear = !this.linear
        b.textContent = this.linear ? 'log' : 'linear'
        b.title = this.linear ? 'Show logarithmic axes' : 'Show linear axes'
        this.draw()
      })
    }
    if (list(option.dataZoom).length) {
      const b = button('zoom', 'Show the zoom slider; ctrl and wheel zoom too', () => {
        this.slider = !this.slider
        b.setAttribute('aria-pressed', String(this.slider))
        for (const b of steps) b.hidden = !this.slider
        this.draw()
      })
      b.setAttribute('aria-pressed', 'false')
      const steps = [
        button('+', 'Show less, larger', () => this.magnify(0.5)),
        button('\u2212', 'Show more, smaller', () => this.magnify(2)),
        button('\u2190', 'Move the window to the left', () => this.magnify(1, -0.2)),
        button('\u2192', 'Move the window to the right', () => this.magnify(1, 0.2)),
      ]
      this.reset = button('reset', 'Show all again', () => this.chart.dispatchAction({ type: 'dataZoom', dataZoomIndex: 0, start: 0, end: 100 }))
      for (const b of [...steps, this.reset]) b.hidden = true
    }
    this.curves(option, button)
    const row = this.fold(button, 'save', 'Keep this figure as a file')
    const name = this.name
    button('picture, svg', 'The figure as it is printed, with its fonts', () => save(name + '.svg', 'image/svg+xml', picture(this.twin)), row)
    const kept = option.thinned ? 'The values that are kept here: of a long curve the extremes of each stretch; all are in the csv beside the figure' : 'The values as they are drawn here, to 6 digits of the largest'
    button('values, csv', kept, () => save(name + '-drawn.csv', 'text/csv', data(this.option())), row)
  }

  // keys makes the chart answer to keys: they read values, and zoom where the chart does.
  keys(zooms, thinned) {
    const move = (by) => () => this.cursor.step(by)
    const acts = { ArrowLeft: move(-1), ArrowRight: move(1), ArrowDown: move(-1), ArrowUp: move(1), Home: move(-Infinity), End: move(Infinity), Escape: () => this.cursor.leave() }
    if (this.drawn.tooltip.axisPointer.axis === 'y') delete acts.ArrowLeft, delete acts.ArrowRight
    else delete acts.ArrowDown, delete acts.ArrowUp
    const shifted = {}
    if (zooms) {
      Object.assign(acts, { '+': () => this.magnify(0.5), '-': () => this.magnify(2), 0: () => this.magnify(1e3) })
      Object.assign(shifted, { ArrowLeft: () => this.magnify(1, -0.2), ArrowRight: () => this.magnify(1, 0.2) })
    }
    const hint = document.createElement('p')
    hint.className = 'hint'
    hint.id = 'keys-' + ++hints
    const arrows = acts.ArrowUp ? '\u2191 \u2193' : '\u2190 \u2192'
    hint.textContent = `${arrows} read the values` + (zooms ? ' \u00b7 shift and \u2190 \u2192 move \u00b7 + \u2212 zoom \u00b7 0 shows all' : '') + ' \u00b7 Esc ends' + (thinned ? ' \u00b7 a long curve is kept here by the extremes of each stretch, all its values in the csv' : '')
    this.live.after(hint)
    this.live.setAttribute('aria-describedby', hint.id)
    this.live.addEventListener('keydown', (e) => {
      const act = (e.shiftKey && shifted[e.key]) || acts[e.key]
      if (!act || e.ctrlKey || e.metaKey || e.altKey) return
      e.preventDefault()
      act()
    })
  }

  // fold is a row of buttons behind one button.
  fold(button, name, title) {
    const row = document.createElement('span')
    row.className = 'curves'
    row.dataset.of = name
    row.hidden = true
    const open = button(name, title, () => {
      row.hidden = !row.hidden
      open.setAttribute('aria-expanded', String(!row.hidden))
    })
    open.setAttribute('aria-expanded', 'false')
    open.after(row)
    return row
  }

  // curves offers a button for each named curve, behind one button.
  curves(option, button) {
    const names = [...new Set(list(option.series).filter((s) => s.id[0] === 's' && s.name).map((s) => s.name))]
    if (names.length < 2) return
    const row = this.fold(button, 'curves', 'Choose the curves to show')
    for (const name of names) {
      const b = button(name, 'Show or hide this curve', () => {
        const shown = this.off.has(name)
        if (shown) this.off.delete(name)
        else this.off.add(name)
        b.setAttribute('aria-pressed', String(shown))
        this.drawn.legend.selected[name] = shown
        this.chart.setOption({ series: respread(this.drawn, this.off) })
        this.chart.dispatchAction({ type: shown ? 'legendSelect' : 'legendUnSelect', name })
      }, row)
      b.setAttribute('aria-pressed', 'true')
    }
  }
}
