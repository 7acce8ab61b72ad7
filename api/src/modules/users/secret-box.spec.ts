import { describe, expect, it } from 'vitest'
import { testSettings } from '../../testing/test-app.js'
import { SecretBox } from './secret-box.js'

const boxOf = (sessionSecret: string) =>
  new SecretBox(testSettings('postgres://nobody@127.0.0.1:1/none', { sessionSecret }))
const SECRET = Buffer.from('twenty letters of it')

describe('a sealed secret', () => {
  const box = boxOf('a secret for tests alone, of forty letters')
  const sealed = box.seal(SECRET, '7')

  it('is opened by the same key for the same owner, and is never sealed alike', () => {
    expect(Buffer.from(box.open(sealed, '7') ?? [])).toEqual(SECRET)
    expect(box.seal(SECRET, '7')).not.toEqual(sealed)
    expect(sealed.includes(SECRET)).toBe(false)
  })

  it('stays shut for another owner, another key, and when a bit of it was turned', () => {
    expect(box.open(sealed, '8')).toBeUndefined()
    expect(boxOf('another secret for tests, of forty letters').open(sealed, '7')).toBeUndefined()
    for (const place of [0, 12, 28, sealed.length - 1]) {
      const meddled = Buffer.from(sealed)
      meddled[place] = (meddled[place] ?? 0) ^ 1
      expect(box.open(meddled, '7')).toBeUndefined()
    }
    expect(box.open(sealed.subarray(0, 20), '7')).toBeUndefined()
  })
})
