import { Body, Controller, Get, Injectable, Module, Post } from '@nestjs/common'
import { AssayError } from '@weirlight/shared/assay'
import { defineEndpoint, id } from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { MoveRefused } from '@weirlight/shared/states'
import { z } from 'zod'
import { useTestApp } from '../../testing/test-app.js'
import { SYSTEM } from '../database/acting.js'
import { Database } from '../database/database.js'
import { CurrentActor, Endpoint, Input, Upload, type InputOf } from './endpoint.decorator.js'
import type { FileAnswer } from './file-answer.js'
import type { UploadedFile } from './upload.js'

/* One route for each thing that the plumbing does with requests and answers. */

const base = { summary: 'For the test', method: 'POST' } as const
export const save = defineEndpoint({
  ...base,
  name: 'testSave',
  path: '/test/things/:id',
  permission: 'samples.receive',
  params: z.object({ id }),
  query: z.object({ dry: z.enum(['yes', 'no']).default('no') }),
  body: z.strictObject({
    name: z.string().min(1, 'Please fill this in.'),
    standards: z.array(z.object({ volume: z.number('Enter the volume.') })),
  }),
  response: z.object({ id: z.string(), name: z.string(), actor: z.string() }),
})
export const fail = defineEndpoint({
  ...base,
  name: 'testFail',
  path: '/test/fail',
  permission: 'public',
  body: z.object({ how: z.string() }),
})
export const wrong = defineEndpoint({
  ...base,
  method: 'GET',
  name: 'testWrong',
  path: '/test/wrong',
  permission: 'public',
  response: z.object({ count: z.number() }),
})
export const upload = defineEndpoint({
  ...base,
  name: 'testUpload',
  path: '/test/upload',
  permission: 'signed-in',
  upload: true,
  response: z.object({ filename: z.string(), size: z.number(), sha256: z.string() }),
})
export const file = defineEndpoint({
  ...base,
  method: 'GET',
  name: 'testFile',
  path: '/test/file',
  permission: 'public',
  file: ['text/csv'],
})

@Injectable()
class Failures {
  constructor(private readonly db: Database) {}

  async run(how: string): Promise<void> {
    if (how === 'assay') throw new AssayError('negative-concentration', 'A concentration is below zero.', 3)
    if (how === 'move')
      throw new MoveRefused('own-work', 'You prepared this batch; somebody else must sign it.')
    if (how === 'unique') {
      await this.db.transaction(SYSTEM, 'user.invite', null, async (trx) => {
        for (let n = 0; n < 2; n += 1) {
          await trx
            .insertInto('users')
            .values({ email: 'twice@people.example', name: 'T', role: 'auditor' })
            .execute()
        }
      })
    }
    throw new Error('a secret of the inside: password=hunter2')
  }
}

@Controller()
class TestController {
  constructor(private readonly failures: Failures) {}

  @Endpoint(save)
  save(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof save>) {
    return { id: params.id, name: body.name, actor: actor.name, secret: 'stripped' }
  }

  @Endpoint(fail)
  async fail(@Input() { body }: InputOf<typeof fail>) {
    await this.failures.run(body.how)
  }

  @Endpoint(wrong)
  wrong() {
    return { count: 'many' as unknown as number }
  }

  @Endpoint(upload)
  upload(@Upload() { filename, bytes, sha256 }: UploadedFile) {
    return { filename, size: bytes.length, sha256 }
  }

  @Endpoint(file)
  file(): FileAnswer {
    return { content: Buffer.from('a,b\r\n'), mediaType: 'text/csv', filename: 'Südwerk "1".csv' }
  }

  @Get('test/undeclared')
  undeclared() {
    return { secret: true }
  }

  @Post('test/undeclared')
  undeclaredPost(@Body() body: unknown) {
    return body
  }
}

@Module({ controllers: [TestController], providers: [Failures] })
export class TestModule {}

/** What `save` takes. */
export const good = { params: { id: '7' }, query: {}, body: { name: 'A', standards: [{ volume: 1 }] } }

/** Routes without a contract keep the application from starting; here one must get through to be refused. */
export const useHttpTestApp = () => useTestApp({ imports: [TestModule], allowUndeclaredRoutes: true })
