import { describe, expect, it } from 'vitest'
import { deviceUri, isRecoveryCode, newRecoveryCode, newSecret, stepOf, toBase32 } from './one-time-codes.js'

// RFC 6238, appendix B, the rows of SHA-1; quoted from memory, and computed again with node:crypto by RFC 4226, section 5.3.
// It prints eight digits; the six that devices show are their last six, because both are remainders of one number.
const SECRET = Buffer.from('12345678901234567890', 'ascii')
const PUBLISHED: [seconds: number, step: number, totp: string][] = [
  [59, 0x1, '94287082'],
  [1_111_111_109, 0x23523ec, '07081804'],
  [1_111_111_111, 0x23523ed, '14050471'],
  [1_234_567_890, 0x273ef07, '89005924'],
  [2_000_000_000, 0x3f940aa, '69279037'],
  [20_000_000_000, 0x27bc86aa, '65353130'],
]
const at = (seconds: number) => new Date(seconds * 1000)

describe('the codes of a device', () => {
  it.each(PUBLISHED)('are those of RFC 6238 at %d', (seconds, step, totp) => {
    expect(stepOf(SECRET, totp.slice(-6), at(seconds))).toBe(step)
  })

  it.each(PUBLISHED)('count one step early and late and no further, at %d', (seconds, step, totp) => {
    const code = totp.slice(-6)
    expect(stepOf(SECRET, code, at(seconds - 30))).toBe(step)
    expect(stepOf(SECRET, code, at(seconds + 30))).toBe(step)
    expect(stepOf(SECRET, code, at(seconds + 60))).toBeUndefined()
    if (seconds > 60) expect(stepOf(SECRET, code, at(seconds - 60))).toBeUndefined()
  })

  it('are of their own secret alone', () => {
    expect(stepOf(Buffer.from('12345678901234567891', 'ascii'), '287082', at(59))).toBeUndefined()
  })
})

describe('what a device is given', () => {
  it('is twenty bytes, new each time, in base32 and in the address that devices read', () => {
    // the secret of RFC 6238 in base32 (RFC 4648): computed with coreutils' base32
    expect(toBase32(SECRET)).toBe('GEZDGNBVGY3TQOJQGEZDGNBVGY3TQOJQ')
    const secret = newSecret()
    expect(secret).toHaveLength(20)
    expect(toBase32(newSecret())).not.toBe(toBase32(secret))
    const uri = new URL(deviceUri({ secret, account: 'ann@lab.example', issuer: 'City & Water Laboratory' }))
    expect(uri.protocol).toBe('otpauth:')
    expect(decodeURIComponent(uri.pathname)).toContain('ann@lab.example')
    expect(uri.searchParams.get('secret')).toBe(toBase32(secret))
    expect(uri.searchParams.get('issuer')).toBe('City & Water Laboratory')
  })
})

describe('a recovery code', () => {
  it('is four groups of four, new each time, and no code of a device', () => {
    const code = newRecoveryCode()
    expect(code).toMatch(/^([A-Z2-7]{4}-){3}[A-Z2-7]{4}$/)
    expect(newRecoveryCode()).not.toBe(code)
    expect(isRecoveryCode(code.replaceAll('-', ''))).toBe(true)
    expect(isRecoveryCode('287082')).toBe(false)
  })
})
