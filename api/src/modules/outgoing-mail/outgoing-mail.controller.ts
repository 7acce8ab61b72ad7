import { Controller } from '@nestjs/common'
import { listMail, retryMail } from '@weirlight/shared/contracts'
import { Endpoint, Input, type InputOf } from '../../platform/index.js'
import { OutgoingMailService } from './outgoing-mail.service.js'

@Controller()
export class OutgoingMailController {
  constructor(private readonly mail: OutgoingMailService) {}

  @Endpoint(listMail)
  list(@Input() { query }: InputOf<typeof listMail>) {
    return this.mail.list(query)
  }

  @Endpoint(retryMail)
  retry(@Input() { params }: InputOf<typeof retryMail>) {
    return this.mail.retry(params.id)
  }
}
