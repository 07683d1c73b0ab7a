// One figure as a chart to work with: values at the pointer, zoom, curves on and
// off, logarithmic or linear axes; all of it also from the keyboard.
import { echarts } from './charts.js'
import { mark, prepare, setTooltip } from './prepare.js'
import { tooltip } from './tip.js'

setTooltip(tooltip)

const list = (v) => (v === undefined ? [] : Array.isArray(v) ? v : [v])

export class Live {
  constructor(figure) {
    this.figure = figure
    this.twin = figure.querySelector('.twin')
    this.live = figure.querySelector('.live')
    this.text = figure.querySelector('script[type="application/json"]').textContent
    const option = JSON.parse(this.text)
    this.linear = false
    this.off = new Set()
    this.zoom = [0, 100]
    this.slider = false
    this.height = Number(figure.dataset.height)

    this.live.hidden = false
    this.live.style.height = this.height + 'px'
    const words = this.twin.querySelector('desc')
    this.live.setAttribute('role', 'group')
    this.live.setAttribute('aria-label', words ? words.textContent : '')
    this.width = this.live.clientWidth
    this.chart = echarts.init(this.live, null, { renderer: 'svg', width: this.width, height: this.height })
    this.draw()
    this.twin.hidden = true
    this.controls(option)

    this.chart.on('datazoom', () => this.zoomed())
    new ResizeObserver(() => {
      const width = this.live.clientWidth
      if (!width || width === this.width) return
      this.width = width
      this.draw()
    }).observe(this.live)
  }

  // paper shows the static picture instead of the chart, for printing.
  paper(on) {
    this.twin.hidden = !on
    this.live.hidden = on
  }

  // draw makes the whole drawing from the option and the state.
  draw() {
    const option = JSON.parse(this.text)
    if (this.linear) {
      for (const axis of this.switched(option)) {
        axis.type = 'value'
        if (axis.min > 0) axis.min = 0
      }
    }
    const height = this.height + (this.slider ? 46 : 0)
    this.live.style.height = height + 'px'
    prepare(option, this.width)
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
    if (!whole || !this.whole) this.chart.setOption({ xAxis: marks })
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
        closer.hidden = farther.hidden = !this.slider
        this.draw()
      })
      b.setAttribute('aria-pressed', 'false')
      const closer = button('+', 'Show less, larger', () => this.magnify(0.5))
      const farther = button('\u2212', 'Show more, smaller', () => this.magnify(2))
      this.reset = button('reset', 'Show all again', () => this.chart.dispatchAction({ type: 'dataZoom', dataZoomIndex: 0, start: 0, end: 100 }))
      closer.hidden = farther.hidden = this.reset.hidden = true
      this.live.tabIndex = 0
      this.live.addEventListener('keydown', (e) => {
        const act = { '+': () => this.magnify(0.5), '-': () => this.magnify(2), ArrowLeft: () => this.magnify(1, -0.2), ArrowRight: () => this.magnify(1, 0.2), 0: () => this.magnify(1e3) }[e.key]
        if (!act || e.ctrlKey || e.metaKey || e.altKey) return
        e.preventDefault()
        act()
      })
    }
    this.curves(option, button)
  }

  // curves offers a button for each named curve, behind one button.
  curves(option, button) {
    const names = [...new Set(list(option.series).filter((s) => s.id[0] === 's' && s.name).map((s) => s.name))]
    if (names.length < 2) return
    const row = document.createElement('span')
    row.className = 'curves'
    row.hidden = true
    const open = button('curves', 'Choose the curves to show', () => {
      row.hidden = !row.hidden
      open.setAttribute('aria-expanded', String(!row.hidden))
    })
    open.setAttribute('aria-expanded', 'false')
    for (const name of names) {
      const b = button(name, 'Show or hide this curve', () => {
        const shown = this.off.has(name)
        if (shown) this.off.delete(name)
        else this.off.add(name)
        b.setAttribute('aria-pressed', String(shown))
        this.drawn.legend.selected[name] = shown
        this.chart.dispatchAction({ type: shown ? 'legendSelect' : 'legendUnSelect', name })
      }, row)
      b.setAttribute('aria-pressed', 'true')
    }
    open.after(row)
  }
}
