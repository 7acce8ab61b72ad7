import { describe, expect, it } from 'vitest'
import { codeProblem, sha256Of, writtenCode } from './code-words'

// codes constructed
describe('writtenCode', () => {
  it.each(['7QHK-2M9D-XP4T-W3RC', '7qhk2m9dxp4tw3rc', ' 7qhk 2m9d–xp4t w3rc '])('“%s”', (typed) =>
    expect(writtenCode(typed)).toBe('7QHK-2M9D-XP4T-W3RC'),
  )
})

describe('codeProblem', () => {
  it.each([
    ['7QHK-2M9D-XP4T-W3RC', null],
    ['', 'Type the code that stands at the foot of the certificate.'],
    ['7QHK-2M9', 'A code has sixteen letters and digits; this one has 7.'],
    ['7QHK-2M9D-XP4T-W3RC-7', 'A code has sixteen letters and digits; this one has 17.'],
  ])('“%s”', (typed, sentence) => expect(codeProblem(typed)).toBe(sentence))
})

describe('sha256Of', () => {
  it('gives the digest of “abc” (FIPS 180-4, example of SHA-256)', async () => {
    expect(await sha256Of(new Blob(['abc']))).toBe(
      'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad',
    )
  })
})
