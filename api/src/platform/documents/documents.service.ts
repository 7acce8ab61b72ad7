import { Injectable, type OnApplicationShutdown } from '@nestjs/common'
import type { Piscina } from 'piscina'
import { openWorkerPool, workerFile } from '../worker-pool.js'
import type { DocumentDefinition } from './document.js'

const TIME_LIMIT = 30_000

/** PDFs, laid out off the event loop. */
@Injectable()
export class DocumentsService implements OnApplicationShutdown {
  private pool: Piscina | undefined

  /** `timeLimit` in milliseconds, for a document of hundreds of pages */
  async render(definition: DocumentDefinition, { timeLimit = TIME_LIMIT } = {}): Promise<Buffer> {
    this.pool ??= openWorkerPool(workerFile(import.meta.url, 'pdf-worker'))
    const bytes = (await this.pool.run(definition, { signal: AbortSignal.timeout(timeLimit) })) as Uint8Array
    return Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength)
  }

  async onApplicationShutdown(): Promise<void> {
    await this.pool?.destroy()
  }
}
