import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import type { Executor, Trx } from '../../platform/index.js'

export type SignedThing = 'calibrations' | 'batches' | 'certificates'
export type Meaning = 'prepared' | 'reviewed' | 'accepted for use' | 'released' | 'amended'

export interface SignatureRow {
  id: string
  meaning: Meaning
  printedName: string
  role: string
  at: Date
  contentSha256: string
}

@Injectable()
export class SignaturesRepository {
  async insert(
    trx: Trx,
    row: {
      thing: SignedThing
      thingId: string
      meaning: Meaning
      userId: string
      printedName: string
      role: string
      content: string
      contentSha256: string
    },
  ): Promise<SignatureRow> {
    const { rows } = await sql<SignatureRow>`
      insert into signatures (thing, thing_id, meaning, user_id, printed_name, role, content, content_sha256)
      values (${row.thing}, ${row.thingId}, ${row.meaning}, ${row.userId}, ${row.printedName}, ${row.role},
        ${row.content}::jsonb, ${row.contentSha256})
      returning id, meaning, printed_name, role, at, content_sha256`.execute(trx)
    const [inserted] = rows
    if (!inserted) throw new Error('The signature was not written.')
    return inserted
  }

  async list(db: Executor, thing: SignedThing, thingId: string): Promise<SignatureRow[]> {
    const { rows } = await sql<SignatureRow>`
      select id, meaning, printed_name, role, at, content_sha256 from signatures
      where thing = ${thing} and thing_id = ${thingId} order by at, id`.execute(db)
    return rows
  }
}
