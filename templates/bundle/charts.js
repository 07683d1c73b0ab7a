// The parts of the chart library that our figures use.
import * as echarts from 'echarts/core'
import { LineChart, ScatterChart } from 'echarts/charts'
import {
  AxisPointerComponent, DataZoomInsideComponent, DataZoomSliderComponent, GridComponent, LegendPlainComponent,
  TitleComponent, TooltipComponent,
} from 'echarts/components'
import { SVGRenderer } from 'echarts/renderers'

echarts.use([
  LineChart, ScatterChart, GridComponent, TooltipComponent, AxisPointerComponent, TitleComponent,
  LegendPlainComponent, DataZoomInsideComponent, DataZoomSliderComponent, SVGRenderer,
])
export { echarts }
