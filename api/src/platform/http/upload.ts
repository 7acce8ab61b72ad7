import { createHash } from 'node:crypto'
import { LIMITS } from '@weirlight/shared/limits'
import type { FastifyRequest } from 'fastify'
import { ProblemError } from './problem.js'

export interface UploadedFile {
  filename: string
  mediaType: string
  bytes: Buffer
  sha256: string
}

const MEGABYTE = 1024 * 1024

/** Reads the one file of a multipart request, never more of it than the limit. */
export async function readUpload(request: FastifyRequest): Promise<UploadedFile> {
  if (!request.isMultipart()) {
    throw new ProblemError('upload-unreadable', 'Send the file as a form upload (multipart/form-data).')
  }
  const declared = Number(request.headers['content-length'] ?? 0)
  // the form's own lines around the file are small
  if (declared > LIMITS.uploadBytes + 16_384) throw tooLarge()
  const part = await request.file()
  if (!part) throw new ProblemError('upload-unreadable', 'No file was sent.')
  const chunks: Buffer[] = []
  let size = 0
  for await (const chunk of part.file as AsyncIterable<Buffer>) {
    size += chunk.length
    if (size > LIMITS.uploadBytes) throw tooLarge()
    chunks.push(chunk)
  }
  if (part.file.truncated) throw tooLarge()
  if (size === 0) throw new ProblemError('upload-unreadable', 'The file is empty.')
  const bytes = Buffer.concat(chunks)
  return {
    filename: cleanName(part.filename),
    mediaType: part.mimetype,
    bytes,
    sha256: createHash('sha256').update(bytes).digest('hex'),
  }
}

function tooLarge(): ProblemError {
  return new ProblemError(
    'upload-too-large',
    `The file is larger than ${LIMITS.uploadBytes / MEGABYTE} MB. Send the readings alone, or in parts.`,
  )
}

function cleanName(name: string): string {
  const last = name.split(/[/\\]/).at(-1) ?? ''
  return last.replaceAll(/\p{Cc}/gu, '').slice(0, 200) || 'upload'
}
