import { SetMetadata } from '@nestjs/common'
import type { Job } from './job.js'

export const JOB = 'weirlight:job'

export interface JobRun {
  id: string
  /** 1 for the first try */
  attempt: number
}

type Handler<D> = (data: D, run: JobRun) => Promise<void>

/** `@JobHandler(renderCertificate) async render({ id }: { id: string }) {}` on a provider's method. Must be idempotent. */
export function JobHandler<D>(job: Job<D>) {
  const decorate = SetMetadata(JOB, job)
  return <T extends Handler<D>>(
    target: object,
    key: string | symbol,
    descriptor: TypedPropertyDescriptor<T>,
  ): void => {
    decorate(target, key, descriptor)
  }
}
