import { Injectable } from '@nestjs/common'
import { AssayError, evaluateRunRules, individualsChart } from '@weirlight/shared/assay'
import type {
  Assessment,
  AssessmentRules,
  getControlChart,
  QueryOf,
  ReportingRules,
} from '@weirlight/shared/contracts'
import { assessPosition } from '@weirlight/shared/worksheet'
import { Database, type AnswerOf } from '../../platform/index.js'
import { ControlChartsRepository, type ChartedPosition } from './control-charts.repository.js'

type Chart = AnswerOf<typeof getControlChart>
type Kind = QueryOf<typeof getControlChart>['kind']
interface Point {
  at: Date
  value: number
  batchId: string | null
  label: string
}

const TITLES: Record<Kind, { title: string; unit: string }> = {
  verification: { title: 'Verification standards, recovery', unit: '%' },
  control: { title: 'Laboratory control samples, recovery', unit: '%' },
  'method-blank': { title: 'Method blanks', unit: 'mg/L' },
  duplicate: { title: 'Duplicates, difference from the mean', unit: '%' },
  slope: { title: 'Slopes of signed calibrations, per cm of cell', unit: 'A per mg/L and cm' },
}

const SIGNAL_WORDS: Record<string, string> = {
  WE1: 'beyond an action limit',
  WE2: 'two of three beyond the same warning limit',
  WE3: 'four of five beyond one standard deviation on one side',
  WE4: 'eight in a row on one side',
}

/** Quality control over time: limits from the values themselves, signals by the Western Electric rules. */
@Injectable()
export class ControlChartsService {
  constructor(
    private readonly db: Database,
    private readonly charts: ControlChartsRepository,
  ) {}

  async chart({ methodId, kind }: QueryOf<typeof getControlChart>): Promise<Chart> {
    const points = kind === 'slope' ? await this.slopes(methodId) : await this.values(methodId, kind)
    const values = points.map((point) => point.value)
    const limits = attempt(() => individualsChart(values))
    const signals = limits
      ? (attempt(() =>
          evaluateRunRules(values, {
            center: limits.center,
            sigma: limits.sigma,
            rules: ['WE1', 'WE2', 'WE3', 'WE4'],
          }),
        ) ?? [])
      : []
    return {
      ...TITLES[kind],
      center: limits?.center ?? null,
      upperAction: limits?.upperAction ?? null,
      lowerAction: limits?.lowerAction ?? null,
      upperWarning: limits?.upperWarning ?? null,
      lowerWarning: limits?.lowerWarning ?? null,
      points: points.map((point, index) => ({
        at: point.at.toISOString(),
        value: point.value,
        batchId: point.batchId,
        label: point.label,
        signals: signals
          .filter((signal) => signal.index === index)
          .map((signal) => SIGNAL_WORDS[signal.rule] ?? signal.rule),
      })),
    }
  }

  private async slopes(methodId: string): Promise<Point[]> {
    const rows = await this.charts.slopes(this.db.read, methodId)
    return rows.reverse().flatMap((row) =>
      row.signedAt === null
        ? []
        : [
            {
              at: row.signedAt,
              value: row.slope / Number(row.cellPathCm),
              batchId: null,
              label: `${row.number}, ${row.instrumentName}`,
            },
          ],
    )
  }

  private async values(methodId: string, kind: Exclude<Kind, 'slope'>): Promise<Point[]> {
    const rows = await this.charts.positions(this.db.read, { methodId, kind })
    const samples = new Map(rows.filter((row) => row.kind === 'sample').map((row) => [row.positionId, row]))
    return rows
      .filter((row) => row.kind === kind)
      .flatMap((row) => {
        const parent = row.ofPositionId === null ? undefined : samples.get(row.ofPositionId)
        const assessed = assess(row, parent ? assess(parent, null) : null)
        const value = valueOf(kind, { assessed, parent: parent ? assess(parent, null) : null })
        if (value === null) return []
        return [
          {
            at: row.readAt,
            value,
            batchId: row.batchId,
            label: `${row.batchNumber}, position ${row.position}`,
          },
        ]
      })
  }
}

/** Near the quantification limit a duplicate is judged in mg/L; the chart shows what compares across runs. */
function valueOf(
  kind: Exclude<Kind, 'slope'>,
  given: { assessed: Assessment; parent: Assessment | null },
): number | null {
  if (kind !== 'duplicate') return given.assessed.qcValue
  return given.assessed.qcText?.endsWith('% apart') ? given.assessed.qcValue : null
}

function assess(row: ChartedPosition, parent: Assessment | null): Assessment {
  return assessPosition(
    {
      kind: row.kind,
      absorbances: row.absorbances.map(Number),
      dilution: Number(row.dilution),
      expected: row.expected === null ? null : Number(row.expected),
      added: null,
      parent,
      limits: [],
      reporting: row.reporting as ReportingRules,
    },
    row.rules as AssessmentRules,
  )
}

function attempt<T>(compute: () => T): T | null {
  try {
    return compute()
  } catch (error) {
    if (error instanceof AssayError) return null
    throw error
  }
}
