import { Injectable } from '@nestjs/common'
import type { BatchView, BodyOf, applyReadings, readingsPreview } from '@weirlight/shared/contracts'
import { batchStates } from '@weirlight/shared/states'
import type { Actor } from '@weirlight/shared/permissions'
import { z } from 'zod'
import {
  Clock,
  Database,
  notAllowedNow,
  notFound,
  SheetsService,
  toXlsx,
  type FileAnswer,
  type UploadedFile,
} from '../../platform/index.js'
import { UploadsRepository } from '../samples/index.js'
import { assessBatch } from './assess-batch.js'
import { BatchesService } from './batches.service.js'
import { readReadings, runSheetColumns, runSheetRows } from './reading-file.js'
import { RunningService } from './running.service.js'

const keptPreview = z.object({
  bad: z.number(),
  entries: z.array(
    z.object({
      positionId: z.string(),
      replicate: z.number(),
      absorbance: z.string(),
      supersedes: z.string().nullable(),
    }),
  ),
})

const XLSX = 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet'

/** Readings by file: the run sheet goes out, comes back filled in, is shown, and entered whole or not at all. */
@Injectable()
export class ReadingFilesService {
  constructor(
    private readonly db: Database,
    private readonly clock: Clock,
    private readonly views: BatchesService,
    private readonly running: RunningService,
    private readonly uploads: UploadsRepository,
    private readonly sheets: SheetsService,
  ) {}

  async runSheet(id: string): Promise<FileAnswer> {
    const whole = await this.views.whole(this.db.read, id)
    const { batch } = whole
    const columns = runSheetColumns(batch.replicates)
    const content = await toXlsx(
      [
        {
          name: batch.number,
          columns: columns.map(({ key, title }) => ({ header: title, width: WIDTHS[key] ?? 11 })),
          rows: runSheetRows(assessBatch(whole).positions, batch.replicates),
        },
      ],
      this.clock.now(),
    )
    return { content, mediaType: XLSX, filename: `run-sheet-${batch.number}.xlsx` }
  }

  async preview(actor: Actor, id: string, file: UploadedFile): Promise<z.input<typeof readingsPreview>> {
    const whole = await this.views.whole(this.db.fresh, id)
    batchStates.move(whole.batch.state, 'read')
    const sheet = await this.sheets.read(file)
    const { rows, entries } = readReadings(sheet.rows, {
      positions: assessBatch(whole).positions,
      replicates: whole.batch.replicates,
    })
    const bad = rows.filter(({ ok }) => !ok).length
    const uploadId = await this.db.transaction(actor, 'batch.preview', null, (trx) =>
      this.uploads.insert(trx, {
        kind: 'readings',
        aboutId: id,
        file,
        preview: { bad, entries },
        uploadedBy: actor.userId,
      }),
    )
    return { uploadId, fileName: file.filename, sha256: file.sha256, good: rows.length - bad, bad, rows }
  }

  async apply(
    actor: Actor,
    { id, uploadId }: { id: string; uploadId: string },
    body: BodyOf<typeof applyReadings>,
  ): Promise<BatchView> {
    return this.db.transaction(actor, 'batch.read', body.reason ?? null, async (trx) => {
      const upload = await this.uploads.lock(trx, uploadId)
      if (upload?.kind !== 'readings' || upload.aboutId !== id) throw notFound('file')
      if (upload.appliedAt) throw notAllowedNow('The readings of this file were entered already.')
      const { bad, entries } = keptPreview.parse(upload.preview)
      if (bad > 0) {
        throw notAllowedNow('Some rows of this file need another look. Correct the file and load it again.')
      }
      if (entries.length === 0) throw notAllowedNow('This file holds no readings.')
      const { reason } = body
      const view = await this.running.enter(trx, actor, {
        id,
        source: 'file',
        uploadId,
        entries: entries.map((entry) => ({ ...entry, reason })),
      })
      await this.uploads.markApplied(trx, uploadId)
      return view
    })
  }
}

const WIDTHS: Record<string, number> = { position: 9, kind: 14, sample: 30, point: 28, dilution: 9 }
