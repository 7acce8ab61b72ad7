import { init, type EChartsOption } from 'echarts'
import { describe, expect, it } from 'vitest'
import { curveBand, fitCalibration, predictConcentration } from '../assay/index.js'
import { calibrationChart, residualsChart } from './calibration-chart.js'
import { roundAxis, type ChartColours } from './chart-frame.js'
import { controlChart, controlNumbers } from './control-chart.js'
import { drawnLimit, trendChart } from './trend-chart.js'

/* Drawn without a browser, as the PDF does. Numbers are constructed. */

const colours: ChartColours = {
  paper: '#F6F5F0',
  sheet: '#FFFFFF',
  ink: '#1B2733',
  quiet: '#5B6873',
  rule: '#D9D6CC',
  hair: '#EAE7DE',
  weir: '#0F4C5C',
  copper: '#9A4A23',
  meets: '#2F6B3A',
  caution: '#8A5A00',
  above: '#A61B29',
}

function draw(option: EChartsOption): string {
  const chart = init(null, null, { renderer: 'svg', ssr: true, width: 560, height: 320 })
  chart.setOption(option)
  const svg = chart.renderToSVGString()
  chart.dispose()
  expect(svg).not.toMatch(/NaN|Infinity|undefined/)
  return svg
}

const texts = (svg: string) => [...svg.matchAll(/<text[^>]*>([^<]*)<\/text>/g)].map((match) => match[1])
const count = (svg: string, colour: string) => svg.split(`fill="${colour}"`).length - 1

const points = [-0.001, 0.101, 0.199, 0.402, 0.798].map((absorbance, index) => ({
  concentration: [0, 0.5, 1, 2, 4][index] ?? 0,
  absorbance,
}))
const fit = fitCalibration({ points, model: 'linear' })

describe('calibration chart', () => {
  const input = {
    points,
    curve: curveBand(fit).points,
    analyteName: 'iron',
    unit: 'mg/L',
    wavelengthNm: 510,
    colours,
  }

  it('names both axes and shows no label below zero for a blank a hair under it', () => {
    const found = texts(draw(calibrationChart(input)))
    expect(found).toContain('iron, mg/L')
    expect(found).toContain('absorbance, 510 nm')
    expect(found.filter((text) => text?.startsWith('-'))).toEqual([])
  })

  it('keeps the negative blank in the drawing', () => {
    const option = calibrationChart({
      ...input,
      points: [{ concentration: 0, absorbance: -0.05 }, ...points],
    })
    expect(JSON.stringify(option)).toContain('[0,-0.05]')
    expect(JSON.parse(JSON.stringify(option)).yAxis.min).toBeLessThan(-0.05)
  })

  it('marks what was left out and the second source by shape and colour', () => {
    const svg = draw(
      calibrationChart({
        ...input,
        points: [...points, { concentration: 3, absorbance: 0.7, leftOut: true }],
      }),
    )
    expect(count(svg, colours.caution)).toBe(1)
    expect(count(draw(calibrationChart(input)), colours.caution)).toBe(0)
  })

  it('draws readings before there is a curve, and says so when there is nothing', () => {
    draw(calibrationChart({ ...input, curve: [] }))
    expect(texts(draw(calibrationChart({ ...input, points: [] })))).toEqual([
      'The curve appears with the first readings.',
    ])
  })

  it('is plain data: nothing is lost as JSON', () => {
    const option = calibrationChart(input)
    expect(JSON.parse(JSON.stringify(option))).toEqual(option)
  })
})

describe('residuals chart', () => {
  it('shows thousandths on an axis around zero', () => {
    const svg = draw(residualsChart({ points: fit.readBack, unit: 'mg/L', colours }))
    expect(texts(svg)).toContain('residual, mA')
    expect(texts(svg)).toContain('0')
  })

  it('draws a perfect line', () => {
    draw(
      residualsChart({
        points: points.map(({ concentration }) => ({ concentration, residual: 0 })),
        unit: 'mg/L',
        colours,
      }),
    )
  })
})

describe('trend chart', () => {
  const base = { at: '2026-10-01T08:00:00Z', when: '2026-10-01 10:00', value: 0.02, text: '0.020' }
  const results = [
    { ...base, verdict: 'below' as const, nonDetect: false },
    {
      ...base,
      at: '2026-10-20T08:00:00Z',
      value: 0.01,
      text: '<0.010',
      verdict: 'below' as const,
      nonDetect: true,
    },
    {
      ...base,
      at: '2026-11-20T08:00:00Z',
      value: 0.07,
      text: '0.070',
      verdict: 'above' as const,
      nonDetect: false,
    },
  ]
  const limit = { name: 'Secondary level', value: 0.05, text: '0.050' }

  it('writes the limit at its line and fills only what lies above', () => {
    const svg = draw(trendChart({ points: results, limit, unit: 'mg/L', colours }))
    expect(texts(svg)).toContain('Secondary level 0.050')
    expect(count(svg, colours.above)).toBeGreaterThanOrEqual(1)
    const quiet = draw(trendChart({ points: results.slice(0, 2), limit: null, unit: 'mg/L', colours }))
    expect(count(quiet, colours.above)).toBe(0)
  })

  it('puts points in the order of time and keeps the reported text for the reader', () => {
    const option = trendChart({ points: results.toReversed(), limit, unit: 'mg/L', colours })
    const text = JSON.stringify(option)
    expect(text.indexOf('2026-10-01T')).toBeLessThan(text.indexOf('2026-11-20T'))
    expect(text).toContain('<0.010 mg/L')
  })

  it('draws a single result and none', () => {
    draw(trendChart({ points: results.slice(0, 1), limit, unit: 'mg/L', colours }))
    expect(texts(draw(trendChart({ points: [], limit, unit: 'mg/L', colours })))).toEqual([
      'No results in this time.',
    ])
  })
})

describe('control chart', () => {
  const limits = { center: 100, upperAction: 109, lowerAction: 91, upperWarning: 106, lowerWarning: 94 }
  const values = [99, 101, 112, 100].map((value, index) => ({
    label: `11-0${index + 1}`,
    value,
    signals: index === 2 ? ['1_3s'] : [],
  }))

  it('names its lines with their values and fills the signal', () => {
    const svg = draw(controlChart({ points: values, ...limits, unit: 'recovery, %', colours }))
    for (const text of ['action 109.0', 'warning 106.0', 'centre 100.0', 'warning 94.0', 'action 91.0']) {
      expect(texts(svg)).toContain(text)
    }
    expect(count(svg, colours.above)).toBeGreaterThan(0)
  })

  it('draws values before there are limits', () => {
    const none = {
      center: null,
      upperAction: null,
      lowerAction: null,
      upperWarning: null,
      lowerWarning: null,
    }
    draw(controlChart({ points: values, ...none, unit: 'recovery, %', colours }))
    draw(controlChart({ points: [], ...none, unit: 'recovery, %', colours }))
  })
})

describe('numbers of a control chart', () => {
  const points = [{ value: 0.3004 }]
  it('carry trailing zeros to the second digit of the standard deviation', () => {
    // 3 s = 0.006, so s = 0.002 and its second digit stands at 0.0001
    const shown = controlNumbers({ center: 0.3, upperAction: 0.306, points })
    expect([0.3, 0.306, -0.3, -0.00001].map(shown)).toEqual(['0.3000', '0.3060', '−0.3000', '0.0000'])
  })
  it('have four digits of the largest value while there are no limits', () => {
    const shown = controlNumbers({
      center: null,
      upperAction: null,
      points: [{ value: 98 }, { value: 101.26 }],
    })
    expect([98, 101.26].map(shown)).toEqual(['98.0', '101.3'])
  })
})

describe('limit of a trend', () => {
  it('keeps the digits its programme gives it, in either unit', () => {
    const limit = { name: 'MCL', value: '0.010', unit: 'mg/L' } as const
    expect(drawnLimit(limit, 'mg/L')).toEqual({ name: 'MCL', value: 0.01, text: '0.010' })
    expect(drawnLimit(limit, 'ug/L').text).toBe('10')
    expect(drawnLimit({ name: 'MCL', value: '50', unit: 'ug/L' }, 'mg/L').text).toBe('0.050')
  })
})

describe('axis labels', () => {
  it('carry the decimals of the step', () => {
    const svg = draw(
      trendChart({
        points: [
          {
            at: '2026-10-01T08:00:00Z',
            value: 0.19,
            text: '0.19',
            when: '2026-10-01 08:00',
            verdict: null,
            nonDetect: false,
          },
        ],
        limit: null,
        unit: 'mg/L',
        colours,
      }),
    )
    expect(texts(svg)).toEqual(expect.arrayContaining(['0.00', '0.05', '0.10', '0.15', '0.20']))
  })
})

describe('residuals of points that lie on the line', () => {
  it('stand on nothing, not on the dust of binary arithmetic', () => {
    const points = [
      { concentration: 0, residual: 1e-17 },
      { concentration: 1, residual: -2e-17 },
    ]
    const svg = draw(residualsChart({ points, unit: 'mg/L', colours }))
    expect(texts(svg)).toContain('0.1')
    expect(texts(svg).every((text) => (text?.length ?? 0) <= 'residual, mA'.length)).toBe(true)
  })
})

describe('axis ends', () => {
  it.each([
    [[0, 0.83], { min: 0, max: 1, interval: 0.2 }],
    [[0, 4], { min: 0, max: 4, interval: 1 }],
    [[-0.3, 0.3], { min: -0.4, max: 0.4, interval: 0.2 }],
    [[0, 0], { min: 0, max: 1, interval: 0.2 }],
    [[5, 5], { min: 2, max: 8, interval: 1 }],
  ])('%j', (values, expected) => {
    expect(roundAxis(values)).toEqual(expected)
  })
})

describe('confidence band of the curve', () => {
  it('is narrowest at the centre, holds the curve, and ends where it should', () => {
    const band = curveBand(fit, { from: 0, to: 4, count: 41 }).points
    const widths = band.map((point) => point.high - point.low)
    expect(band[widths.indexOf(Math.min(...widths))]?.concentration).toBeCloseTo(1.5, 6)
    expect(band.at(-1)?.concentration).toBe(4)
    for (const point of band) {
      const line = (fit.coefficients[0] ?? 0) + (fit.coefficients[1] ?? 0) * point.concentration
      expect(point.fitted).toBeCloseTo(line, 12)
      expect(point.low).toBeLessThan(point.fitted)
    }
  })

  // without the scatter of the reading itself the band lies inside the interval of an unknown
  it('is narrower than the interval of an unknown, carried over by the slope', () => {
    const unknown = predictConcentration(fit, { absorbances: [0.3] })
    const band = curveBand(fit, { from: unknown.concentration, to: 4, count: 2 }).points[0]
    const half = ((band?.high ?? 0) - (band?.low ?? 0)) / 2 / (fit.coefficients[1] ?? 1)
    expect(half).toBeLessThan(unknown.interval.high - unknown.concentration)
  })

  it('refuses what is not a range', () => {
    expect(() => curveBand(fit, { from: 2, to: 2 })).toThrow('start below')
    expect(() => curveBand(fit, { count: 1 })).toThrow('2 to 500')
    expect(() => curveBand(fit, { confidence: 1 })).toThrow('confidence')
  })
})
