import { Bench } from 'tinybench'
import {
  applyDilution,
  combinedUncertainty,
  compareWithLimit,
  detectionLimits,
  fitCalibration,
  predictConcentration,
  reportValue,
} from '../src/assay/index.js'

/*
 * Operations a second of what a keystroke at the bench sets off. Fails when the batch of 60 readings, from absorbance
 * to verdict, takes 2 ms or more (median): the preview must not be felt.
 */

const LIMIT_MS = 2

const sixPoints = [0, 0.4, 1, 2, 3, 4].map((concentration, i) => ({
  concentration,
  absorbance: 0.004 + 0.198 * concentration + ([0.001, -0.002, 0.001, 0.003, -0.002, 0.001][i] ?? 0),
}))
const thirtyPoints = Array.from({ length: 30 }, (_, i) => {
  const concentration = Math.floor(i / 3) * 0.5
  return { concentration, absorbance: 0.004 + 0.198 * concentration + (((i * 7) % 11) - 5) / 4000 }
})
const fit = fitCalibration({ points: sixPoints, model: 'linear' })
const limits = detectionLimits(fit)
const batch = Array.from({ length: 60 }, (_, i) => 0.01 + (i * 0.77) / 60)

function fromAbsorbanceToVerdict(): string[] {
  return batch.map((absorbance) => {
    const predicted = predictConcentration(fit, { absorbances: [absorbance] })
    const diluted = applyDilution({
      concentration: predicted.concentration,
      standardError: predicted.standardError,
      dilutionFactor: 2,
    })
    const { expandedUncertainty } = combinedUncertainty({
      components: [
        { name: 'calibration', value: diluted.standardError ?? 0, kind: 'absolute' },
        { name: 'standards', value: 0.006, kind: 'relative' },
        { name: 'repeatability', value: 0.012, kind: 'relative' },
      ],
      at: diluted.concentration,
    })
    const reported = reportValue({
      concentration: diluted.concentration,
      expandedUncertainty,
      limits: { detection: limits.detectionLimit, quantification: limits.quantificationLimit },
      nonDetect: 'less-than-loq',
      rounding: { to: 'significant', digits: 3, ties: 'half-even' },
      unit: 'mg/L',
    })
    const { verdict } = compareWithLimit({
      value: diluted.concentration,
      expandedUncertainty,
      limit: 0.3,
      rule: 'four-zone',
    })
    return `${reported.text} ${verdict}`
  })
}

const BATCH = 'batch of 60 readings, absorbance to verdict'

/** Median milliseconds of every task in one round. */
async function measure(): Promise<Map<string, number>> {
  const bench = new Bench({ time: 500, warmupTime: 200 })
  bench
    .add('6-point fit with read-back', () => {
      fitCalibration({ points: sixPoints, model: 'linear' })
    })
    .add('30-point weighted fit', () => {
      fitCalibration({ points: thirtyPoints, model: 'linear', weighting: 'inverse-concentration' })
    })
    .add('30-point parabola', () => {
      fitCalibration({ points: thirtyPoints, model: 'quadratic' })
    })
    .add('inverse prediction', () => {
      predictConcentration(fit, { absorbances: [0.31, 0.312] })
    })
    .add(BATCH, () => {
      fromAbsorbanceToVerdict()
    })
  await bench.run()
  return new Map(
    bench.tasks.map(({ name, result }) => {
      if (!('latency' in result)) throw new Error(`${name} did not run`)
      return [name, result.latency.p50]
    }),
  )
}

// a neighbour on the machine can spoil a round, so a slow one is measured again, twice at most
let medians = await measure()
for (let again = 0; again < 2 && (medians.get(BATCH) ?? Infinity) >= LIMIT_MS; again += 1) {
  medians = await measure()
}
console.table(
  Array.from(medians, ([task, median]) => ({
    task,
    'ops/s': Math.round(1000 / median),
    'median ms': median.toFixed(4),
  })),
)
const batchMs = medians.get(BATCH) ?? Infinity
if (batchMs >= LIMIT_MS) {
  console.error(`The batch took ${batchMs.toFixed(3)} ms; it must stay under ${LIMIT_MS} ms.`)
  process.exitCode = 1
}
