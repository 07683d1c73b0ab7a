// What runs without a browser: pictures from chart options, MathML from TeX.
import temml from 'temml'
import { echarts } from './charts.js'
import { unpack } from './packed.js'
import { prepare } from './prepare.js'

// svg draws an option (JSON text) and gives the SVG text.
globalThis.svg = function (json, width, height) {
  const option = prepare(unpack(JSON.parse(json)), width)
  delete option.tooltip
  delete option.dataZoom
  delete option.axisPointer
  delete option.toolbox
  for (const axis of [].concat(option.xAxis, option.yAxis)) if (axis) axis.axisPointer = { show: false }
  const chart = echarts.init(null, null, { renderer: 'svg', ssr: true, width, height })
  try {
    chart.setOption(option)
    return chart.renderToSVGString()
  } finally {
    chart.dispose()
  }
}

// tex sets TeX as MathML; faulty TeX throws an Error with what and where.
globalThis.tex = function (source, display) {
  return temml.renderToString(source, { displayMode: display, throwOnError: true, trust: false, strict: false, maxExpand: 1000, maxSize: [50, 50] })
}
