import { Readable } from 'node:stream'
import { StreamableFile } from '@nestjs/common'

/** What a file endpoint gives back. */
export interface FileAnswer {
  content: Buffer | Readable
  mediaType: string
  filename: string
  /** shown in the page instead of downloaded */
  isInline?: boolean
}

/** RFC 6266: a plain name for old readers, the whole one in UTF-8. */
export function contentDisposition(filename: string, isInline = false): string {
  const clean = filename.replaceAll(/[\p{Cc}/\\]/gu, '_')
  const plain = clean.replaceAll(/[^\x20-\x7e]|["%]/g, '_')
  const encoded = encodeURIComponent(clean).replaceAll(
    /['()*]/g,
    (c) => `%${c.charCodeAt(0).toString(16).toUpperCase()}`,
  )
  return `${isInline ? 'inline' : 'attachment'}; filename="${plain}"; filename*=UTF-8''${encoded}`
}

export function toStreamable(answer: FileAnswer): StreamableFile {
  const stream = answer.content instanceof Readable ? answer.content : Readable.from([answer.content])
  return new StreamableFile(stream, {
    type: answer.mediaType,
    disposition: contentDisposition(answer.filename, answer.isInline),
    ...(Buffer.isBuffer(answer.content) ? { length: answer.content.length } : {}),
  })
}
