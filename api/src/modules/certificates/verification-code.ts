import { randomBytes } from 'node:crypto'

/** without letters and digits that are read for one another */
const ALPHABET = '23456789ABCDEFGHJKLMNPQRSTUVWXYZ'

/** Printed on the certificate; 80 random bits, in groups that can be read over the telephone. */
export function newVerificationCode(): string {
  const letters = [...randomBytes(16)].map((byte) => ALPHABET[byte % ALPHABET.length] ?? '')
  return [0, 4, 8, 12].map((at) => letters.slice(at, at + 4).join('')).join('-')
}
