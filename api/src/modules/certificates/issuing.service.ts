import { Injectable } from '@nestjs/common'
import type { CertificateSnapshot } from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { certificateStates, type CertificateState } from '@weirlight/shared/states'
import { Clock, HandlesEvent, JobsService, notAllowedNow, Settings, type Trx } from '../../platform/index.js'
import { LaboratoryService } from '../laboratory/index.js'
import { ResultsService, samplesReported } from '../results/index.js'
import { CertificatesRepository } from './certificates.repository.js'
import { renderCertificate } from './jobs/certificates.jobs.js'
import { makeSnapshot } from './make-snapshot.js'
import { newVerificationCode } from './verification-code.js'

const LATER_RESULTS = 'Further results of the sample were released.'

/** Freezes what is released of a sample into a certificate; the document and the mail follow as a job. */
@Injectable()
export class IssuingService {
  constructor(
    private readonly clock: Clock,
    private readonly settings: Settings,
    private readonly jobs: JobsService,
    private readonly laboratory: LaboratoryService,
    private readonly results: ResultsService,
    private readonly certificates: CertificatesRepository,
  ) {}

  /** A sample in which nothing is left to measure gets its certificate in the same transaction. */
  @HandlesEvent(samplesReported)
  async issueForReported(
    trx: Trx,
    { sampleIds, actor }: { sampleIds: string[]; actor: Actor },
  ): Promise<void> {
    for (const sampleId of [...sampleIds].sort((a, b) => Number(a) - Number(b))) {
      await this.certificates.lockSample(trx, sampleId)
      await this.issue(trx, { actor, sampleId, reason: LATER_RESULTS })
    }
  }

  /**
   * Issues the sample's certificate; where one is current, an amendment that replaces it, says what was, is and why.
   * @returns the new certificate's id; undefined when there is nothing released
   */
  async issue(
    trx: Trx,
    { actor, sampleId, reason }: { actor: Actor; sampleId: string; reason: string },
  ): Promise<string | undefined> {
    const results = await this.results.releasedOf(trx, sampleId)
    if (results.length === 0) return undefined
    const current = await this.certificates.lockCurrent(trx, sampleId)
    if (current) {
      certificateStates.move(current.state as CertificateState, 'supersede')
      await this.certificates.move(trx, { id: current.id, state: 'superseded', reason: '' })
    }
    const amendment = current ? current.amendment + 1 : 0
    const base = current ? current.number.replace(/-A\d+$/, '') : await this.certificates.nextNumber(trx)
    const number = amendment === 0 ? base : `${base}-A${amendment}`
    const resultIds = results.map((row) => row.id)
    const facts = await this.certificates.facts(trx, sampleId)
    const verificationCode = newVerificationCode()
    const snapshot = makeSnapshot({
      number,
      replaces: current
        ? { number: current.number, snapshot: current.snapshot as unknown as CertificateSnapshot }
        : null,
      reason: current ? reason : '',
      issuedAt: this.clock.now(),
      verificationCode,
      publicUrl: this.settings.publicUrl,
      laboratory: await this.laboratory.get(trx),
      facts,
      results,
      resultFacts: await this.certificates.resultFacts(trx, resultIds),
    })
    const id = await this.certificates.insert(trx, {
      number,
      clientId: facts.clientId,
      sampleId,
      snapshot,
      verificationCode,
      amendsId: current?.id ?? null,
      amendment,
      reason: current ? reason : '',
      issuedBy: actor.userId,
      resultIds,
    })
    await this.jobs.enqueue(trx, renderCertificate, { id })
    return id
  }

  async require(trx: Trx, given: { actor: Actor; sampleId: string; reason: string }): Promise<string> {
    const id = await this.issue(trx, given)
    if (id === undefined)
      throw notAllowedNow('Nothing of this sample is released yet, so there is nothing to certify.')
    return id
  }
}
