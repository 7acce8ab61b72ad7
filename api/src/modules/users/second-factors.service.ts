import { createHash } from 'node:crypto'
import { Injectable } from '@nestjs/common'
import { Clock, MailService, ProblemError, type Trx } from '../../platform/index.js'
import { LaboratoryService } from '../laboratory/index.js'
import { secondFactorOffMail } from './mails/second-factor-off.mail.js'
import { isRecoveryCode, newRecoveryCode, stepOf } from './one-time-codes.js'
import { SecondFactorsRepository } from './second-factors.repository.js'
import { SecretBox } from './secret-box.js'
import { UsersRepository, type UserRow } from './users.repository.js'

const RECOVERY_CODES = 10

export interface TakenCode {
  /** after a recovery code was used; null after a code of the device */
  recoveryCodesLeft: number | null
}

/** The second factors of everybody: a code is taken once, and a factor is taken off with a message to its owner. */
@Injectable()
export class SecondFactorsService {
  constructor(
    private readonly factors: SecondFactorsRepository,
    private readonly users: UsersRepository,
    private readonly box: SecretBox,
    private readonly clock: Clock,
    private readonly mail: MailService,
    private readonly laboratory: LaboratoryService,
  ) {}

  /** A code of the device or a recovery code. @throws wrong-code on the field `code` */
  async take(trx: Trx, userId: string, code: string): Promise<TakenCode> {
    if (!isRecoveryCode(code)) {
      await this.takeDeviceCode(trx, userId, code)
      return { recoveryCodesLeft: null }
    }
    const recoveryCodesLeft = await this.factors.takeRecoveryHash(trx, userId, hashOf(code))
    if (recoveryCodesLeft === undefined)
      throw wrongCode('This is none of your recovery codes, or it was used already.')
    return { recoveryCodesLeft }
  }

  async takeDeviceCode(trx: Trx, userId: string, code: string): Promise<void> {
    const row = await this.factors.find(trx, userId)
    const secret = row && this.box.open(row.secret, userId)
    if (row && !secret)
      throw wrongCode(
        'The server’s secret was changed, and your device’s codes count no longer. Use a recovery code, or ask the administrator to take the second factor off.',
      )
    const step = secret && stepOf(secret, code, this.clock.now())
    if (step === undefined)
      throw wrongCode(
        'This is not the code of now. Wait for the next one; is the clock of your device right?',
      )
    if (!(await this.factors.takeStep(trx, userId, step)))
      throw wrongCode('This code was used already. Wait for the next one.')
  }

  /** @returns the codes, which nobody can read again */
  async renewRecoveryCodes(trx: Trx, userId: string): Promise<string[]> {
    const codes = Array.from({ length: RECOVERY_CODES }, newRecoveryCode)
    const hashes = codes.map((code) => hashOf(code.replaceAll('-', '')))
    await this.factors.putRecoveryHashes(trx, userId, hashes)
    return codes
  }

  /** @param by the administrator who does it, and why; null when it is the owner */
  async takeOff(trx: Trx, user: UserRow, by: { name: string; reason: string } | null): Promise<void> {
    await this.factors.delete(trx, user.id)
    await this.users.updateSecondFactor(trx, user.id, { isOn: false })
    const laboratory = await this.laboratory.find(trx)
    await this.mail.queue(trx, {
      key: `second-factor-off:${user.id}:${user.version}`,
      to: user.email,
      ...secondFactorOffMail({
        name: user.name,
        by,
        laboratoryName: laboratory?.name ?? 'the laboratory',
      }),
      about: { kind: 'user', id: user.id },
    })
  }
}

function wrongCode(message: string): ProblemError {
  return new ProblemError('wrong-code', message, { errors: [{ path: 'code', message }] })
}

function hashOf(code: string): string {
  return createHash('sha256').update(code).digest('hex')
}
