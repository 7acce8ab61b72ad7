import { Module } from '@nestjs/common'
import { OutgoingMailController } from './outgoing-mail.controller.js'
import { OutgoingMailRepository } from './outgoing-mail.repository.js'
import { OutgoingMailService } from './outgoing-mail.service.js'

@Module({ controllers: [OutgoingMailController], providers: [OutgoingMailService, OutgoingMailRepository] })
export class OutgoingMailModule {}
