import * as echarts from 'echarts'
import type { EChartsOption } from 'echarts'

/** The chart the page shows, as an SVG for a document (`{ svg }`). No browser, no animation. */
export function chartSvg(
  option: EChartsOption,
  { width, height }: { width: number; height: number },
): string {
  const chart = echarts.init(null, null, { renderer: 'svg', ssr: true, width, height })
  try {
    chart.setOption({ ...option, animation: false, textStyle: { fontFamily: 'Roboto', ...option.textStyle } })
    return chart.renderToSVGString()
  } finally {
    chart.dispose()
  }
}
