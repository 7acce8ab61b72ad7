import { Injectable, Module } from '@nestjs/common'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { z } from 'zod'
import { createTestApp, type TestApp } from '../../testing/test-app.js'
import { SYSTEM } from '../database/acting.js'
import { currentRequestId } from '../http/request-context.js'
import { JobHandlers } from './handlers.js'
import { JobHandler, type JobRun } from './job-handler.decorator.js'
import { defineJob, noData } from './job.js'
import { JobsService } from './jobs.service.js'

const echo = defineJob({ name: 'test.echo', data: z.object({ word: z.string() }), retryDelaySeconds: 1 })
const orphan = defineJob({ name: 'test.orphan', data: z.object({}) })

const sweep = defineJob({ name: 'test.sweep', data: noData, schedule: '0 3 1 1 *', runsAtStart: true })
let sweeps = 0

const seen: { word: string; attempt: number; requestId: string | undefined }[] = []
let failures = 0

@Injectable()
class Echo {
  @JobHandler(echo)
  async hear({ word }: { word: string }, { attempt }: JobRun): Promise<void> {
    seen.push({ word, attempt, requestId: currentRequestId() })
    if (failures > 0) {
      failures -= 1
      throw new Error('not this time')
    }
    return Promise.resolve()
  }

  @JobHandler(sweep)
  async sweep(): Promise<void> {
    sweeps += 1
    return Promise.resolve()
  }
}

@Module({ providers: [Echo] })
class EchoModule {}

let at: TestApp
beforeAll(async () => {
  at = await createTestApp({ imports: [EchoModule], isWorker: true })
})
afterAll(() => at.close())

async function enqueue(word: string): Promise<void> {
  await at.database.db.transaction(SYSTEM, 'test.job', null, (trx) =>
    at.get(JobsService).enqueue(trx, echo, { word }),
  )
}
const heard = (word: string) => seen.filter((one) => one.word === word)

describe('jobs', () => {
  it('that sweep run when a worker starts, and by the clock', async () => {
    await expect.poll(() => sweeps, { timeout: 8_000, interval: 20 }).toBe(1)
    const { rows } = await at.database.owner.pool.query(
      `select cron from pgboss.schedule where name = 'test.sweep'`,
    )
    expect(rows).toEqual([{ cron: '0 3 1 1 *' }])
  })

  it('run soon after the change that adds them is committed', async () => {
    const started = Date.now()
    await enqueue('soon')
    await expect.poll(() => heard('soon').length, { timeout: 8_000, interval: 20 }).toBe(1)
    expect(Date.now() - started).toBeLessThan(8_000)
    expect(heard('soon')[0]).toMatchObject({
      attempt: 1,
      requestId: expect.stringMatching(/^job-/) as string,
    })
  })

  it('do not exist when the change is undone', async () => {
    await expect(
      at.database.db.transaction(SYSTEM, 'test.job', null, async (trx) => {
        await at.get(JobsService).enqueue(trx, echo, { word: 'undone' })
        throw new Error('undone')
      }),
    ).rejects.toThrow('undone')
    await enqueue('after')
    await expect.poll(() => heard('after').length, { timeout: 8_000, interval: 20 }).toBe(1)
    expect(heard('undone')).toEqual([])
    const { rows } = await at.database.owner.pool.query(
      `select 1 from pgboss.job where data -> 'input' ->> 'word' = 'undone'`,
    )
    expect(rows).toEqual([])
  })

  it('are tried again after a failure', async () => {
    failures = 1
    await enqueue('again')
    await expect
      .poll(() => heard('again').map(({ attempt }) => attempt), { timeout: 15_000, interval: 50 })
      .toEqual([1, 2])
  })

  it('follow one another without a rest between them', async () => {
    const words = Array.from({ length: 30 }, (_, n) => `burst ${n}`)
    const started = Date.now()
    await at.database.db.transaction(SYSTEM, 'test.job', null, async (trx) => {
      for (const word of words) await at.get(JobsService).enqueue(trx, echo, { word })
    })
    await expect
      .poll(() => seen.filter(({ word }) => word.startsWith('burst')).length, {
        timeout: 14_000,
        interval: 20,
      })
      .toBe(30)
    // at a poll of half a second each they would take fifteen
    expect(Date.now() - started).toBeLessThan(10_000)
  })

  it('are shared by two processes, each run once', async () => {
    const second = await createTestApp({ imports: [EchoModule], isWorker: true, database: at.database })
    try {
      const words = Array.from({ length: 20 }, (_, n) => `shared ${n}`)
      for (const word of words) await enqueue(word)
      await expect
        .poll(() => seen.filter(({ word }) => word.startsWith('shared')).length, {
          timeout: 15_000,
          interval: 50,
        })
        .toBe(20)
      expect(new Set(seen.filter(({ word }) => word.startsWith('shared')).map(({ word }) => word)).size).toBe(
        20,
      )
    } finally {
      await second.close()
    }
  })

  it('take only the data they declare', async () => {
    await expect(
      at.database.db.transaction(SYSTEM, 'test.job', null, (trx) =>
        at.get(JobsService).enqueue(trx, echo, { word: 1 as unknown as string }),
      ),
    ).rejects.toThrow()
  })

  it('without a handler, or with two, keep the application from starting', () => {
    const handlers = at.get(JobHandlers)
    const found = handlers.find()
    expect(() => handlers.check(found)).toThrow(`${orphan.name} has no handler`)
    expect(() => handlers.check([...found, ...found])).toThrow('test.echo has 2 handlers')
  })
})
