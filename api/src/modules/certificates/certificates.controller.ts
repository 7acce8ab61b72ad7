import { Controller } from '@nestjs/common'
import {
  amendCertificate,
  certificatePdf,
  checkCertificate,
  getCertificate,
  issueCertificate,
  listCertificates,
  sendCertificateAgain,
  withdrawCertificate,
} from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { CurrentActor, Endpoint, Input, type InputOf } from '../../platform/index.js'
import { CertificatesService } from './certificates.service.js'

@Controller()
export class CertificatesController {
  constructor(private readonly certificates: CertificatesService) {}

  @Endpoint(listCertificates)
  list(@CurrentActor() actor: Actor, @Input() { query }: InputOf<typeof listCertificates>) {
    return this.certificates.list(actor, query)
  }

  @Endpoint(getCertificate)
  get(@CurrentActor() actor: Actor, @Input() { params }: InputOf<typeof getCertificate>) {
    return this.certificates.get(actor, params.id)
  }

  @Endpoint(certificatePdf)
  pdf(@CurrentActor() actor: Actor, @Input() { params }: InputOf<typeof certificatePdf>) {
    return this.certificates.document(actor, params.id)
  }

  @Endpoint(issueCertificate)
  issue(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof issueCertificate>) {
    return this.certificates.issue(actor, params.id, body)
  }

  @Endpoint(amendCertificate)
  amend(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof amendCertificate>) {
    return this.certificates.amend(actor, params.id, body)
  }

  @Endpoint(withdrawCertificate)
  withdraw(@CurrentActor() actor: Actor, @Input() { params, body }: InputOf<typeof withdrawCertificate>) {
    return this.certificates.withdraw(actor, params.id, body)
  }

  @Endpoint(sendCertificateAgain)
  sendAgain(@CurrentActor() actor: Actor, @Input() { params }: InputOf<typeof sendCertificateAgain>) {
    return this.certificates.sendAgain(actor, params.id)
  }

  @Endpoint(checkCertificate)
  check(@Input() { params }: InputOf<typeof checkCertificate>) {
    return this.certificates.check(params.code)
  }
}
