import { Injectable } from '@nestjs/common'
import { type Executor, ProblemError } from '../../platform/index.js'
import { LaboratoryService } from '../laboratory/index.js'
import { PassphraseHasher } from './passphrase-hasher.js'
import { weaknessOf } from './passphrase-rules.js'

export interface PassphraseOwner {
  name: string
  email: string
  clientName: string | null
}

/** What a chosen passphrase must be, beside its length, which the contract asks for. */
@Injectable()
export class PassphrasePolicy {
  constructor(
    private readonly laboratory: LaboratoryService,
    private readonly hasher: PassphraseHasher,
  ) {}

  /** @returns the hash to keep @throws invalid-input on the field `passphrase`, with the reason */
  async accept(db: Executor, owner: PassphraseOwner, passphrase: string): Promise<string> {
    const laboratory = await this.laboratory.find(db)
    const context = [
      owner.name,
      owner.email,
      owner.clientName ?? '',
      laboratory?.name ?? '',
      laboratory?.email ?? '',
    ]
    const message = weaknessOf(passphrase, context)
    if (message)
      throw new ProblemError('invalid-input', message, { errors: [{ path: 'passphrase', message }] })
    return this.hasher.hash(passphrase)
  }
}
