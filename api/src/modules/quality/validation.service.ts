import { createHash } from 'node:crypto'
import { Injectable, type OnApplicationShutdown } from '@nestjs/common'
import type { ValidationReport } from '@weirlight/shared/assay'
import type { listValidationRuns, runValidation } from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import type { Piscina } from 'piscina'
import {
  Clock,
  Database,
  DocumentsService,
  JobHandler,
  JobsService,
  notAllowedNow,
  notFound,
  openWorkerPool,
  workerFile,
  type AnswerOf,
  type FileAnswer,
} from '../../platform/index.js'
import { LaboratoryService } from '../laboratory/index.js'
import { validationDocument } from './documents/validation-document.js'
import { renderValidation } from './jobs/validation.jobs.js'
import { ValidationRepository } from './validation.repository.js'

type Run = AnswerOf<typeof runValidation>
/** some two thousand comparisons on a hundred pages: seconds on an idle machine, and the job may take three minutes */
const LAYOUT_TIME = 150_000

type Row = NonNullable<Awaited<ReturnType<ValidationRepository['find']>>>

/** The laboratory's own evidence that the calculations are right: run by the QA manager, kept, never changed. */
@Injectable()
export class ValidationService implements OnApplicationShutdown {
  private pool: Piscina | undefined

  constructor(
    private readonly db: Database,
    private readonly clock: Clock,
    private readonly jobs: JobsService,
    private readonly documents: DocumentsService,
    private readonly laboratory: LaboratoryService,
    private readonly runs: ValidationRepository,
  ) {}

  async list(): Promise<AnswerOf<typeof listValidationRuns>> {
    return { items: (await this.runs.list(this.db.read)).map(toRun) }
  }

  async run(actor: Actor): Promise<Run> {
    const report = await this.compute()
    const sha256 = createHash('sha256').update(reportFile(report)).digest('hex')
    return this.db.transaction(actor, 'validation.run', null, async (trx) => {
      const id = await this.runs.insert(trx, { byId: actor.userId, report, sha256 })
      await this.jobs.enqueue(trx, renderValidation, { id })
      const row = await this.runs.find(trx, id)
      if (!row) throw notFound('validation report')
      return toRun(row)
    })
  }

  @JobHandler(renderValidation)
  async render({ id }: { id: string }): Promise<void> {
    const row = await this.runs.find(this.db.fresh, id)
    const kept = await this.runs.report(this.db.fresh, id)
    if (!row || !kept || kept.pdf !== null) return
    const { name } = await this.laboratory.get(this.db.fresh)
    const definition = validationDocument(kept.report as unknown as ValidationReport, {
      laboratory: name,
      by: row.byName,
    })
    const pdf = await this.documents.render(definition, { timeLimit: LAYOUT_TIME })
    await this.db.unwatched((trx) => this.runs.keepPdf(trx, { id, pdf }))
  }

  async pdf(id: string): Promise<FileAnswer> {
    const kept = await this.runs.report(this.db.read, id)
    if (!kept) throw notFound('validation report')
    if (kept.pdf === null) throw notAllowedNow('The report is being laid out; it will be here in a moment.')
    return {
      content: kept.pdf,
      mediaType: 'application/pdf',
      filename: `validation-${id}.pdf`,
      isInline: true,
    }
  }

  async json(id: string): Promise<FileAnswer> {
    const kept = await this.runs.report(this.db.read, id)
    if (!kept) throw notFound('validation report')
    return {
      content: reportFile(kept.report),
      mediaType: 'application/json',
      filename: `validation-${id}.json`,
    }
  }

  async onApplicationShutdown(): Promise<void> {
    await this.pool?.destroy()
  }

  private async compute(): Promise<ValidationReport> {
    this.pool ??= openWorkerPool(workerFile(import.meta.url, 'validation-worker'))
    return (await this.pool.run({ now: this.clock.now().toISOString() })) as ValidationReport
  }
}

/** The file that is given out, byte for byte what the hash was taken of: the database keeps no order of keys, so they are sorted. */
function reportFile(report: unknown): Buffer {
  const sorted = (_: string, value: unknown) =>
    typeof value === 'object' && value !== null && !Array.isArray(value)
      ? Object.fromEntries(Object.entries(value).sort(([a], [b]) => (a < b ? -1 : 1)))
      : value
  return Buffer.from(JSON.stringify(report, sorted, 2), 'utf8')
}

function toRun(row: Row): Run {
  return {
    id: row.id,
    at: row.at.toISOString(),
    by: { id: row.byId, name: row.byName },
    engineVersion: row.engineVersion,
    cases: row.cases,
    passed: row.passed,
    failed: row.failed,
    sha256: row.sha256,
    rendered: row.isRendered,
  }
}
