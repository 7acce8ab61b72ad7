import type { MethodDefinition } from '@weirlight/shared/contracts'
import { AssayError, curveBand, type CalibrationFit } from '@weirlight/shared/assay'
import { calibrationChart, residualsChart } from '@weirlight/shared/charts'
import { useMemo } from 'react'
import { Box } from '../../../ui'
import { Chart, useChartColours } from '../../../ui/chart'
import { TintLadder, tintOf } from '../../../ui/tint'
import type { DraftAssessment } from '../draft/calibration-draft'
import { significant } from '../draft/number-texts'

const ANALYTE_NAMES: Record<MethodDefinition['analyte'], string> = {
  Fe: 'iron',
  Cu: 'copper',
  Mn: 'manganese',
  Cr: 'chromium',
}

interface CurveBoxProps {
  live: DraftAssessment
  definition: MethodDefinition
}

/** Ladder of tints, curve and residuals of the readings as they stand. */
export function CurveBox({ live, definition }: CurveBoxProps) {
  const colours = useChartColours()
  const { fit, rows, readBack, stored } = live
  const analyteName = ANALYTE_NAMES[definition.analyte]
  const curve = useMemo(
    () =>
      calibrationChart({
        points: rows.flatMap((row) =>
          row.absorbances.map((absorbance) => ({
            concentration: row.concentration,
            absorbance,
            leftOut: row.leftOut,
            isSecondSource: row.role === 'second-source',
            tint: tintOf(definition.band, absorbance),
          })),
        ),
        curve: bandOf(fit),
        analyteName,
        unit: 'mg/L',
        wavelengthNm: definition.wavelengthNm,
        colours,
      }),
    [rows, fit, definition, analyteName, colours],
  )
  const residuals = useMemo(
    () =>
      residualsChart({
        points: fit?.readBack ?? [],
        upTo: Math.max(0, ...rows.flatMap((row) => (row.absorbances.length > 0 ? row.concentration : []))),
        unit: 'mg/L',
        colours,
      }),
    [fit, rows, colours],
  )
  const steps = rows
    .filter((row) => row.role === 'standard')
    .toSorted((a, b) => a.concentration - b.concentration)
    .map((row) => ({
      label: String(row.concentration),
      absorbance: readBack.get(row.key)?.meanAbsorbance ?? null,
    }))
  const legend = [
    rows.some((row) => row.role === 'second-source' && row.absorbances.length > 0) &&
      'Diamond: second source.',
    rows.some((row) => row.leftOut) && 'Cross: left out of the curve.',
  ]
    .filter(Boolean)
    .join(' ')
  const summary = stored
    ? `Absorbance at ${definition.wavelengthNm} nm against ${analyteName} in mg/L: ${fit?.n ?? 0} readings, slope ${significant(stored.slope, 4)} per mg/L, intercept ${significant(stored.intercept, 3)}.`
    : 'No curve yet.'
  return (
    <Box>
      {steps.length > 0 && <TintLadder band={definition.band} steps={steps} unit="mg/L" />}
      <Chart option={curve} summary={summary} height={300} {...(legend ? { caption: legend } : {})} />
      <Chart
        option={residuals}
        summary="Residuals of the readings in thousandths of absorbance."
        height={150}
      />
    </Box>
  )
}

/** A fit may have no band: two levels alone leave no scatter to judge by. */
function bandOf(fit: CalibrationFit | null) {
  if (!fit) return []
  try {
    return curveBand(fit).points
  } catch (error) {
    if (error instanceof AssayError) return []
    throw error
  }
}
