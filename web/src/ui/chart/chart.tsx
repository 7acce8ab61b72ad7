import type { EChartsCoreOption, EChartsType } from 'echarts/core'
import { useEffect, useRef, useState, type ReactNode } from 'react'
import { Failed } from '../page-states'
import { asProblem, type ProblemError } from '../../lib/problem-error'

interface ChartProps {
  /** from `@weirlight/shared/charts`, drawn with `useChartColours()` */
  option: EChartsCoreOption
  /** what the chart shows, in a sentence or two: read in place of the drawing */
  summary: string
  height?: number
  /** a point was clicked; the data item as the option gave it */
  onPick?: (item: { seriesIndex: number; dataIndex: number; data: unknown }) => void
  caption?: ReactNode
}

/** A chart from a definition that the PDF shares. ECharts is loaded with the first one. */
export function Chart({ option, summary, height = 320, onPick, caption }: ChartProps) {
  const frame = useRef<HTMLDivElement>(null)
  const chart = useRef<EChartsType | null>(null)
  const latest = useRef({ option, onPick })
  const [problem, setProblem] = useState<ProblemError | null>(null)
  const [isDrawn, setDrawn] = useState(false)

  useEffect(() => {
    latest.current = { option, onPick }
    chart.current?.setOption(option, { notMerge: true })
  }, [option, onPick])

  useEffect(() => {
    const element = frame.current
    if (!element) return
    let isGone = false
    let observer: ResizeObserver | undefined
    const draw = async () => {
      const { init } = await import('./echarts')
      if (isGone) return
      const made = init(element, null, { renderer: 'svg' })
      chart.current = made
      made.setOption(latest.current.option)
      made.on('click', (event) => {
        const { seriesIndex, dataIndex, data } = event
        if (seriesIndex === undefined) return
        latest.current.onPick?.({ seriesIndex, dataIndex, data })
      })
      observer = new ResizeObserver(() => made.resize())
      observer.observe(element)
      setDrawn(true)
    }
    draw().catch((error: unknown) => setProblem(asProblem(error)))
    return () => {
      isGone = true
      observer?.disconnect()
      chart.current?.dispose()
      chart.current = null
    }
  }, [])

  if (problem) return <Failed problem={problem} />
  return (
    <figure className="chart">
      <div ref={frame} role="img" aria-label={summary} style={{ height }} aria-busy={!isDrawn} />
      {caption && <figcaption className="note">{caption}</figcaption>}
    </figure>
  )
}
