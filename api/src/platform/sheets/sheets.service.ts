import { Injectable, type OnApplicationShutdown } from '@nestjs/common'
import { LIMITS } from '@weirlight/shared/limits'
import type { Piscina } from 'piscina'
import { ProblemError } from '../http/problem.js'
import { openWorkerPool, workerFile } from '../worker-pool.js'
import type { Sheet, SheetBounds } from './sheet.js'
import type { SheetAnswer, SheetTask } from './sheet-worker.js'

const TIME_LIMIT = 20_000
const BOUNDS: SheetBounds = {
  // a line of headings beside the rows
  maxRows: LIMITS.uploadRows + 1,
  maxColumns: 60,
  maxCellLength: 2000,
  maxUnpackedBytes: 40 * 1024 * 1024,
}

/** Reads uploaded rows: what a file is, its first bytes say, not its name. */
@Injectable()
export class SheetsService implements OnApplicationShutdown {
  private pool: Piscina | undefined

  /** @throws ProblemError upload-unreadable, with the sentence that says what to do */
  async read(file: { filename: string; bytes: Buffer }, bounds: Partial<SheetBounds> = {}): Promise<Sheet> {
    const kind = kindOf(file.bytes)
    const extension = /\.([a-z0-9]+)$/i.exec(file.filename)?.[1]?.toLowerCase() ?? ''
    checkName(extension, kind)
    this.pool ??= openWorkerPool(workerFile(import.meta.url, 'sheet-worker'))
    const task: SheetTask = { bytes: file.bytes, kind, bounds: { ...BOUNDS, ...bounds } }
    const answer = (await this.pool
      .run(task, { signal: AbortSignal.timeout(TIME_LIMIT) })
      .catch((error: unknown) => {
        throw unreadable('The file could not be read in time. Send the rows alone, as csv.', error)
      })) as SheetAnswer
    if ('refused' in answer) throw unreadable(answer.refused.message)
    if (answer.sheet.rows.length === 0) throw unreadable('The file has no rows.')
    return answer.sheet
  }

  async onApplicationShutdown(): Promise<void> {
    await this.pool?.destroy()
  }
}

function kindOf(bytes: Buffer): 'xlsx' | 'csv' {
  const start = bytes.subarray(0, 8)
  if (start.length === 0) throw unreadable('The file is empty.')
  if (start.subarray(0, 4).equals(Buffer.from([0x50, 0x4b, 0x03, 0x04]))) return 'xlsx'
  if (start.equals(Buffer.from([0xd0, 0xcf, 0x11, 0xe0, 0xa1, 0xb1, 0x1a, 0xe1]))) {
    throw unreadable(
      'This is an old or protected spreadsheet (xls). Save it as xlsx without a password, or as csv.',
    )
  }
  if (start.subarray(0, 5).toString('latin1') === '%PDF-') {
    throw unreadable('This is a PDF. Send the rows as xlsx or csv.')
  }
  return 'csv'
}

function checkName(extension: string, kind: 'xlsx' | 'csv'): void {
  if (extension === 'xlsm') throw unreadable('Files with macros (xlsm) are not taken. Save it as xlsx.')
  const fits = kind === 'xlsx' ? extension === 'xlsx' : ['csv', 'txt', 'tsv'].includes(extension)
  if (fits) return
  throw unreadable(
    kind === 'xlsx'
      ? `The file is named .${extension} but its content is packed. Send xlsx or csv.`
      : `The file is named .${extension} but its content is plain text. Send xlsx or csv.`,
  )
}

function unreadable(sentence: string, cause?: unknown): ProblemError {
  return new ProblemError('upload-unreadable', sentence, { cause })
}
