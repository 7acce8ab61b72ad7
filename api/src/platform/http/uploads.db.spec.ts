import { LIMITS } from '@weirlight/shared/limits'
import { describe, expect, it } from 'vitest'
import { aUser } from '../../testing/people.js'
import { upload, useHttpTestApp } from './http.test-support.js'

const at = useHttpTestApp()

describe('an upload', () => {
  const send = async (content: Buffer, filename = 'C:\\bench\\a.csv') => {
    const agent = await at().as(await aUser(at().database.db))
    return agent.upload(upload, { file: { filename, content } })
  }

  it('arrives whole, with a clean name and its hash', async () => {
    const sent = await send(Buffer.from('abc'))
    expect(sent.json).toEqual({
      filename: 'a.csv',
      size: 3,
      // SHA-256 of "abc", FIPS 180-4
      sha256: 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad',
    })
  })

  it('of exactly the limit is taken; one byte more, fifty megabytes, or nothing are not', async () => {
    expect((await send(Buffer.alloc(LIMITS.uploadBytes, 'a'))).status).toBe(200)
    expect((await send(Buffer.alloc(LIMITS.uploadBytes + 1, 'a'))).json).toMatchObject({
      code: 'upload-too-large',
    })
    expect((await send(Buffer.alloc(50 * 1024 * 1024, 'a'))).json).toMatchObject({ code: 'upload-too-large' })
    expect((await send(Buffer.alloc(0))).json).toMatchObject({ code: 'upload-unreadable' })
  })

  it('that is no form is refused', async () => {
    const agent = await at().as(await aUser(at().database.db))
    const sent = await agent.raw({ method: 'POST', url: '/api/test/upload', payload: { a: 1 } })
    expect(sent.json).toMatchObject({ code: 'upload-unreadable' })
  })
})
