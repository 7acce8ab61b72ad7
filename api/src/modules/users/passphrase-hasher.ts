import { Injectable } from '@nestjs/common'
import { hash, verify } from '@node-rs/argon2'

/** argon2id with 19 MiB, two passes, one lane: OWASP Password Storage Cheat Sheet, first choice. */
const COST = { memoryCost: 19_456, timeCost: 2, parallelism: 1 }

@Injectable()
export class PassphraseHasher {
  private decoy: Promise<string> | undefined

  async hash(passphrase: string): Promise<string> {
    return hash(passphrase.normalize('NFKC'), COST)
  }

  /** Without a stored hash the same work is done in vain, so that the time taken tells nobody who has an account. */
  async verify(stored: string | null | undefined, passphrase: string): Promise<boolean> {
    this.decoy ??= this.hash('a decoy that no passphrase is compared with')
    const isRight = await verify(stored ?? (await this.decoy), passphrase.normalize('NFKC'))
    return isRight && Boolean(stored)
  }
}
