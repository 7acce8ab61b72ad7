import { createCipheriv, createDecipheriv, hkdfSync, randomBytes } from 'node:crypto'
import { Injectable } from '@nestjs/common'
import { Settings } from '../../platform/index.js'

const CIPHER = 'aes-256-gcm'
const NONCE_BYTES = 12
const TAG_BYTES = 16

/** Secrets that must be read again are kept encrypted, each bound to its owner, with a key that no database holds. */
@Injectable()
export class SecretBox {
  private readonly key: Uint8Array

  constructor(settings: Settings) {
    this.key = new Uint8Array(hkdfSync('sha256', settings.sessionSecret, '', 'weirlight second factors', 32))
  }

  seal(plain: Uint8Array, owner: string): Buffer {
    const nonce = randomBytes(NONCE_BYTES)
    const cipher = createCipheriv(CIPHER, this.key, nonce).setAAD(Buffer.from(owner))
    const sealed = Buffer.concat([cipher.update(plain), cipher.final()])
    return Buffer.concat([nonce, cipher.getAuthTag(), sealed])
  }

  /** @returns undefined when it was sealed with another key or for another owner */
  open(sealed: Uint8Array, owner: string): Uint8Array | undefined {
    const nonce = sealed.subarray(0, NONCE_BYTES)
    const tag = sealed.subarray(NONCE_BYTES, NONCE_BYTES + TAG_BYTES)
    try {
      const decipher = createDecipheriv(CIPHER, this.key, nonce, { authTagLength: TAG_BYTES })
        .setAAD(Buffer.from(owner))
        .setAuthTag(tag)
      return Buffer.concat([decipher.update(sealed.subarray(NONCE_BYTES + TAG_BYTES)), decipher.final()])
    } catch {
      return undefined
    }
  }
}
