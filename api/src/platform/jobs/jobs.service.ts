import {
  Injectable,
  Logger,
  type BeforeApplicationShutdown,
  type OnApplicationBootstrap,
} from '@nestjs/common'
import PgBoss from 'pg-boss'
import { Settings } from '../config/settings.js'
import type { Executor, Trx } from '../database/executor.js'
import { JOB_SCHEMA } from '../database/job-schema.js'
import { withRequestContext } from '../http/request-context.js'
import { JobHandlers, type FoundHandler } from './handlers.js'
import { JobBell } from './job-bell.js'
import { declaredJobs, type Job } from './job.js'
import { JobsRepository } from './jobs.repository.js'

export interface EnqueueOptions {
  startAfterSeconds?: number
  /** while one with this key waits, another is not added */
  onceKey?: string
}

export interface JobsOptions {
  /** whether this process works on jobs, or only adds them */
  isWorker: boolean
  /** refuse to start when a declared job has no handler; off in tests of one module */
  isStrict: boolean
}

interface Envelope {
  job: string
  input: unknown
}

const DEAD = 'dead-letter'

@Injectable()
export class JobsService implements OnApplicationBootstrap, BeforeApplicationShutdown {
  private readonly logger = new Logger(JobsService.name)
  private readonly boss: PgBoss
  private readonly bell: JobBell
  private readonly settings: Settings

  constructor(
    private readonly handlers: JobHandlers,
    private readonly repository: JobsRepository,
    private readonly options: JobsOptions,
    settings: Settings,
  ) {
    this.settings = settings
    this.bell = new JobBell(settings.databaseUrl, (error) => this.logger.warn(error.message))
    this.boss = new PgBoss({
      connectionString: settings.databaseUrl,
      schema: JOB_SCHEMA,
      application_name: 'weirlight-jobs',
      max: 4,
      // the owner's migrations make and change the tables
      migrate: false,
      supervise: options.isWorker,
      schedule: options.isWorker,
      maintenanceIntervalSeconds: 15,
      archiveCompletedAfterSeconds: 6 * 3600,
      archiveFailedAfterSeconds: 90 * 24 * 3600,
      deleteAfterDays: 30,
    })
    this.boss.on('error', (error) => this.logger.error({ err: error }, 'The job queue reports a fault'))
  }

  /** Adds a job inside the caller's transaction: it exists if and only if the change does. */
  async enqueue<D>(trx: Trx, job: Job<D>, data: D, options: EnqueueOptions = {}): Promise<void> {
    const envelope: Envelope = { job: job.name, input: job.data.parse(data) }
    await this.boss.send(job.name, envelope, {
      db: this.repository.writerOn(trx),
      ...(options.startAfterSeconds === undefined ? {} : { startAfter: options.startAfterSeconds }),
      ...(options.onceKey === undefined ? {} : { singletonKey: options.onceKey, singletonSeconds: 1 }),
    })
    await this.repository.ring(trx, job.name)
  }

  async onApplicationBootstrap(): Promise<void> {
    const found = this.handlers.find()
    if (this.options.isStrict) this.handlers.check(found)
    await this.boss.start()
    await this.boss.createQueue(DEAD)
    for (const job of declaredJobs()) await this.declare(job)
    if (!this.options.isWorker) return
    for (const handler of found) await this.work(handler)
    await this.bell.start()
    for (const { job } of found) await this.arrange(job)
  }

  async beforeApplicationShutdown(): Promise<void> {
    await this.bell.stop()
    await this.boss.stop({ graceful: true, wait: true, timeout: 10_000 })
  }

  /** Runs one handler now, outside the queue: for tests and for `run it again`. */
  async runNow<D>(job: Job<D>, data: D): Promise<void> {
    const handler = this.handlers.find().find((candidate) => candidate.job.name === job.name)
    if (!handler) throw new Error(`${job.name} has no handler.`)
    await handler.run(job.data.parse(data), { id: 'now', attempt: 1 })
  }

  /** Whether the queue answers and no job that is due has waited for two minutes. */
  async isMoving(db: Executor): Promise<boolean> {
    return !(await this.repository.isAnyLate(db))
  }

  private async declare(job: Job): Promise<void> {
    const options = {
      name: job.name,
      retryLimit: job.retryLimit,
      retryDelay: job.retryDelaySeconds,
      retryBackoff: true,
      expireInSeconds: job.expireSeconds,
      retentionDays: 30,
      deadLetter: DEAD,
    }
    await this.boss.createQueue(job.name, options)
    await this.boss.updateQueue(job.name, options)
  }

  /** What happens by itself. Processes that start together share one run at the start. */
  private async arrange(job: Job): Promise<void> {
    const envelope: Envelope = { job: job.name, input: {} }
    if (job.schedule !== undefined) await this.boss.schedule(job.name, job.schedule, envelope)
    if (!job.runsAtStart) return
    await this.boss.send(job.name, envelope, { singletonKey: 'start', singletonSeconds: 5 })
  }

  private async work({ job, run }: FoundHandler): Promise<void> {
    for (let n = 0; n < job.concurrency; n += 1) {
      const worker = { id: '' }
      // more may wait: without this the worker would rest between two jobs until its next poll
      const goOn = () => {
        if (worker.id !== '') this.boss.notifyWorker(worker.id)
      }
      worker.id = await this.boss.work<Envelope>(
        job.name,
        {
          batchSize: 1,
          pollingIntervalSeconds: this.settings.environment === 'test' ? 0.5 : 5,
          includeMetadata: true,
        },
        async (batch: PgBoss.JobWithMetadata<Envelope>[]) => {
          try {
            for (const one of batch) await this.runOne({ job, run }, one)
          } finally {
            if (batch.length > 0) goOn()
          }
        },
      )
      this.bell.on(job.name, goOn)
    }
  }

  private async runOne({ job, run }: FoundHandler, one: PgBoss.JobWithMetadata<Envelope>): Promise<void> {
    const attempt = one.retryCount + 1
    await withRequestContext({ requestId: `job-${one.id}` }, async () => {
      try {
        await run(job.data.parse(one.data.input), { id: one.id, attempt })
      } catch (error) {
        this.logger.error({ err: error, job: job.name, jobId: one.id, attempt }, `The job ${job.name} failed`)
        throw error
      }
    })
  }
}
