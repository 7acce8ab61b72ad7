import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import type { Executor, Trx, UploadedFile } from '../../platform/index.js'

export type UploadKind = 'manifest' | 'readings'

export interface KeptUpload {
  id: string
  kind: UploadKind
  aboutId: string | null
  fileName: string
  sha256: string
  preview: unknown
  appliedAt: Date | null
}

/** Files people load: the bytes as they came, and what was read in them, kept for good. */
@Injectable()
export class UploadsRepository {
  async insert(
    trx: Trx,
    upload: {
      kind: UploadKind
      aboutId: string | null
      file: UploadedFile
      preview: unknown
      uploadedBy: string
    },
  ): Promise<string> {
    const { file } = upload
    const { rows } = await sql<{ id: string }>`
      insert into uploads (kind, about_id, file_name, sha256, bytes, preview, uploaded_by)
      values (${upload.kind}, ${upload.aboutId}, ${file.filename}, ${file.sha256}, ${file.bytes},
        ${JSON.stringify(upload.preview)}::jsonb, ${upload.uploadedBy})
      returning id`.execute(trx)
    const [row] = rows
    if (!row) throw new Error('The upload was not written.')
    return row.id
  }

  async lock(trx: Trx, id: string): Promise<KeptUpload | undefined> {
    const { rows } = await sql<KeptUpload>`
      select id, kind, about_id, file_name, sha256, preview, applied_at from uploads where id = ${id} for update`.execute(
      trx,
    )
    return rows[0]
  }

  async markApplied(trx: Trx, id: string): Promise<void> {
    await sql`update uploads set applied_at = weirlight_now() where id = ${id}`.execute(trx)
  }

  /** The very same bytes, loaded before and applied. */
  async findApplied(
    db: Executor,
    { kind, aboutId, sha256 }: { kind: UploadKind; aboutId: string | null; sha256: string },
  ): Promise<{ fileName: string; appliedAt: Date; appliedBy: string } | undefined> {
    const { rows } = await sql<{ fileName: string; appliedAt: Date; appliedBy: string }>`
      select up.file_name, up.applied_at, u.name as applied_by from uploads up join users u on u.id = up.uploaded_by
      where up.sha256 = ${sha256} and up.kind = ${kind} and up.about_id is not distinct from ${aboutId}
        and up.applied_at is not null
      order by up.id desc limit 1`.execute(db)
    return rows[0]
  }
}
