import type { Actor } from '@weirlight/shared/permissions'
import type { UploadedFile } from './upload.js'

declare module 'fastify' {
  interface FastifyRequest {
    actor?: Actor | undefined
    endpointInput?: unknown
    uploadedFile?: UploadedFile | undefined
  }

  interface Session {
    userId?: string
    /** milliseconds, for the absolute limit */
    signedInAt?: number
    /** milliseconds, written at most once a minute, for the idle limit */
    seenAt?: number
  }
}
