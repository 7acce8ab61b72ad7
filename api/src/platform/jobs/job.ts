import { z } from 'zod'

export interface Job<D = unknown> {
  readonly name: string
  readonly data: z.ZodType<D>
  /** tries after the first, each after twice the time of the last (with a random part) */
  readonly retryLimit: number
  readonly retryDelaySeconds: number
  /** a run that takes longer is given up and tried again */
  readonly expireSeconds: number
  /** how many of it one process works on at the same time */
  readonly concurrency: number
  /** five-field cron in UTC, for what happens by itself; such a job takes no data */
  readonly schedule: string | undefined
  /** also whenever a worker starts: for sweeps, which look for what an earlier process left undone */
  readonly runsAtStart: boolean
}

const declared = new Map<string, Job>()

/**
 * Declares a job. Whatever is declared must have a handler, or the application does not start.
 * `export const renderCertificate = defineJob({ name: 'certificate.render', data: z.object({ id }) })`
 */
export function defineJob<D>(job: {
  name: string
  data: z.ZodType<D>
  retryLimit?: number
  retryDelaySeconds?: number
  expireSeconds?: number
  concurrency?: number
  schedule?: string
  runsAtStart?: boolean
}): Job<D> {
  if (!/^[a-z][a-z-]*(\.[a-z][a-z-]*)+$/.test(job.name))
    throw new Error(`“${job.name}” is no name for a job.`)
  if (declared.has(job.name)) throw new Error(`The job ${job.name} is declared twice.`)
  const whole: Job<D> = {
    retryLimit: 8,
    retryDelaySeconds: 5,
    expireSeconds: 60,
    concurrency: 1,
    schedule: undefined,
    runsAtStart: false,
    ...job,
  }
  declared.set(job.name, whole as Job)
  return whole
}

export function declaredJobs(): readonly Job[] {
  return [...declared.values()]
}

/** the data of a job that runs by the clock */
export const noData = z.object({}).strict()
