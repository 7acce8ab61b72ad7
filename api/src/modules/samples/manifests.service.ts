import { randomUUID } from 'node:crypto'
import { Injectable } from '@nestjs/common'
import { receiveBody, type applyManifest, type manifestPreview } from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { z } from 'zod'
import {
  Clock,
  Database,
  notAllowedNow,
  notFound,
  ProblemError,
  SheetsService,
  showTime,
  type AnswerOf,
  type UploadedFile,
} from '../../platform/index.js'
import { readManifest } from './manifest-reading.js'
import { ReceivingRepository } from './receiving.repository.js'
import { ReceivingService } from './receiving.service.js'
import { UploadsRepository } from './uploads.repository.js'

/** What is kept of a preview: the samples it would receive, ready to be written. */
const keptPreview = z.object({
  bad: z.number(),
  rows: z.array(z.object({ row: z.number(), body: receiveBody })),
})

/** A sheet of samples: read, shown, and received whole or not at all. */
@Injectable()
export class ManifestsService {
  constructor(
    private readonly db: Database,
    private readonly clock: Clock,
    private readonly receiving: ReceivingService,
    private readonly lookups: ReceivingRepository,
    private readonly uploads: UploadsRepository,
    private readonly sheets: SheetsService,
  ) {}

  async preview(actor: Actor, file: UploadedFile): Promise<z.input<typeof manifestPreview>> {
    const timeZone = await this.lookups.timeZone(this.db.read)
    const before = await this.uploads.findApplied(this.db.fresh, {
      kind: 'manifest',
      aboutId: null,
      sha256: file.sha256,
    })
    if (before) {
      const when = showTime(before.appliedAt, timeZone)
      throw new ProblemError(
        'already-exists',
        `${before.appliedBy} received this very file (${before.fileName}) at ${when}. Nothing was received again.`,
      )
    }
    const sheet = await this.sheets.read(file)
    const { rows, bodies } = readManifest(sheet.rows, {
      points: await this.lookups.listPoints(this.db.read, 'all'),
      methods: await this.lookups.listMethods(this.db.read, 'all'),
      timeZone,
      now: this.clock.now(),
      newDraftId: randomUUID,
    })
    const good = rows.filter(({ ok }) => ok)
    const bad = rows.length - good.length
    const kept = { bad, rows: bodies.map((body, index) => ({ row: good[index]?.row ?? 0, body })) }
    const uploadId = await this.db.transaction(actor, 'manifest.preview', null, (trx) =>
      this.uploads.insert(trx, {
        kind: 'manifest',
        aboutId: null,
        file,
        preview: kept,
        uploadedBy: actor.userId,
      }),
    )
    return { uploadId, fileName: file.filename, sha256: file.sha256, rows, good: good.length, bad }
  }

  async apply(actor: Actor, id: string): Promise<AnswerOf<typeof applyManifest>> {
    return this.db.transaction(actor, 'manifest.receive', null, async (trx) => {
      const upload = await this.uploads.lock(trx, id)
      if (upload?.kind !== 'manifest') throw notFound('manifest')
      if (upload.appliedAt) throw notAllowedNow('The samples of this file were received already.')
      const { bad, rows } = keptPreview.parse(upload.preview)
      if (bad > 0) {
        throw notAllowedNow('Some rows of this file need another look. Correct the file and load it again.')
      }
      if (rows.length === 0) throw notAllowedNow('This file holds no samples.')
      // what was good when it was shown may not be any more: a point closed, a method taken out of use
      const found = await this.receiving.check(
        trx,
        rows.map(({ body }) => body),
      )
      const errors = found.flatMap((problems, index) =>
        problems.map(({ path, message }) => ({
          path: `rows.${index}.${path}`,
          message: `Row ${rows[index]?.row ?? ''}: ${message}`,
        })),
      )
      if (errors.length > 0) {
        throw new ProblemError('not-allowed-now', `${errors[0]?.message ?? ''} Nothing was received.`, {
          errors,
        })
      }
      const samples = await this.receiving.insert(trx, actor, {
        bodies: rows.map(({ body }) => body),
        uploadId: id,
      })
      await this.uploads.markApplied(trx, id)
      return { samples }
    })
  }
}
