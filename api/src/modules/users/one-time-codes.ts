import { Secret, TOTP } from 'otpauth'

/** RFC 6238 as every device knows it. */
const FORM = { algorithm: 'SHA1', digits: 6, period: 30 } as const
/** a clock may be one step wrong, each way */
const DRIFT_STEPS = 1
/** RFC 4226 recommends 160 bits */
const SECRET_BYTES = 20
const RECOVERY_BYTES = 10

export function newSecret(): Uint8Array {
  return new Secret({ size: SECRET_BYTES }).bytes
}

export function toBase32(bytes: Uint8Array): string {
  return secretOf(bytes).base32
}

/** What a device reads from the picture. */
export function deviceUri({
  secret,
  account,
  issuer,
}: {
  secret: Uint8Array
  account: string
  issuer: string
}): string {
  return new TOTP({ ...FORM, secret: secretOf(secret), label: account, issuer }).toString()
}

/** @returns the step of time that a code belongs to; undefined when it belongs to none of about now */
export function stepOf(secret: Uint8Array, code: string, at: Date): number | undefined {
  const timestamp = at.getTime()
  const drift = TOTP.validate({
    ...FORM,
    secret: secretOf(secret),
    token: code,
    timestamp,
    window: DRIFT_STEPS,
  })
  return drift === null ? undefined : TOTP.counter({ period: FORM.period, timestamp }) + drift
}

/** `ABCD-EFGH-IJKL-MNOP`: 80 bits, too many to be guessed from a hash */
export function newRecoveryCode(): string {
  const text = new Secret({ size: RECOVERY_BYTES }).base32
  return text.replaceAll(/.{4}(?=.)/g, '$&-')
}

/** A recovery code as the contract hands it on, without its hyphens; a device's code has six digits. */
export function isRecoveryCode(code: string): boolean {
  return code.length > FORM.digits
}

function secretOf(bytes: Uint8Array): Secret {
  return new Secret({ buffer: new Uint8Array(bytes).buffer })
}
