import type { Criterion, MethodDefinition } from '@weirlight/shared/contracts'
import type { StoredFit } from '@weirlight/shared/worksheet'
import { trueMinus } from '../../../lib'
import { Box, Criteria, KeyValues, StatusTag } from '../../../ui'
import type { DraftAssessment } from '../draft/calibration-draft'
import { decimals, isDust, significant, thousands, withError } from '../draft/number-texts'
import './calibrations.css'

interface FindingsProps {
  stored: StoredFit | null
  criteria: readonly Criterion[]
  diagnosis: DraftAssessment['diagnosis']
  refusal: string | null
  definition: MethodDefinition
}

const DIAGNOSIS_MARKS = {
  'as-expected': { word: 'as expected', shape: 'disc', tone: 'meets' },
  low: { word: 'low', shape: 'diamond', tone: 'caution' },
  high: { word: 'high', shape: 'diamond', tone: 'caution' },
} as const

/** The line, what the complex itself says of it, and the criteria of the method. */
export function CalibrationFindings({ stored, criteria, diagnosis, refusal, definition }: FindingsProps) {
  if (!stored) {
    return (
      <Box title="The line">
        <p className="quiet" aria-live="polite">
          {refusal ?? 'The line appears here as the readings are typed.'}
        </p>
      </Box>
    )
  }
  return (
    <>
      <LineBox stored={stored} />
      <Box title="Against the complex itself">
        {stored.molarAbsorptivity !== null && (
          <p>
            ε from this slope <strong>{thousands(stored.molarAbsorptivity, 4)}</strong> L mol⁻¹ cm⁻¹
          </p>
        )}
        <p className="quiet">
          Published: {thousands(definition.molarAbsorptivity.value, 4)} ({definition.molarAbsorptivity.source}
          , {definition.molarAbsorptivity.date})
        </p>
        {diagnosis && (
          <p className="verdict-line">
            <StatusTag mark={DIAGNOSIS_MARKS[diagnosis.verdict]}>{diagnosis.explanation}</StatusTag>
          </p>
        )}
      </Box>
      <Box title="Criteria of the method">
        <Criteria
          items={criteria.map((criterion) => ({ ...criterion, found: trueMinus(criterion.found) }))}
        />
      </Box>
    </>
  )
}

function LineBox({ stored }: { stored: StoredFit }) {
  const curvature = (stored.fit['coefficients'] as number[] | undefined)?.[2]
  const curvatureError = (stored.fit['standardErrors'] as number[] | undefined)?.[2]
  return (
    <Box title={curvature === undefined ? 'The line' : 'The curve'}>
      <KeyValues
        items={[
          { term: 'Slope, A per mg/L', detail: <Exact value={stored.slope} error={stored.slopeError} /> },
          curvature !== undefined && {
            term: 'Curvature, A per (mg/L)²',
            detail: <Exact value={curvature} error={curvatureError ?? 0} />,
          },
          { term: 'Intercept, A', detail: <Exact value={stored.intercept} error={stored.interceptError} /> },
          {
            term: 'Residual sd, A',
            detail: (
              <span title={`${stored.residualStandardDeviation}`}>
                {isDust(stored.residualStandardDeviation)
                  ? 'none: every point lies on it'
                  : significant(stored.residualStandardDeviation, 3)}
              </span>
            ),
          },
          { term: 'r', detail: decimals(stored.correlation, 6) },
          { term: 'r²', detail: decimals(stored.rSquared, 6) },
          {
            term: 'Detection limit',
            detail: limitText(stored.detectionLimit),
          },
          {
            term: 'Quantification limit',
            detail: limitText(stored.quantificationLimit),
          },
        ]}
      />
      <p className="note">Limits by DIN 32645 from the curve, engine {stored.engineVersion}.</p>
    </Box>
  )
}

/** Without scatter there is nothing to find a limit from. */
const limitText = (limit: number | null) =>
  limit === null || isDust(limit) ? 'not calculable' : `${significant(limit, 2)} mg/L`

/** A value with its standard error; both unrounded when pointed at. */
function Exact({ value, error }: { value: number; error: number }) {
  return <span title={`${value} ± ${error}`}>{withError(value, error)}</span>
}
