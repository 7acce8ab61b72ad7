import { Module } from '@nestjs/common'
import { LaboratoryModule } from '../laboratory/index.js'
import { ClientsController } from './clients.controller.js'
import { ClientsRepository } from './clients.repository.js'
import { ClientsService } from './clients.service.js'
import { ContactsRepository } from './contacts.repository.js'
import { ContactsService } from './contacts.service.js'
import { PointsRepository } from './points.repository.js'

@Module({
  imports: [LaboratoryModule],
  controllers: [ClientsController],
  providers: [ClientsRepository, ContactsRepository, PointsRepository, ClientsService, ContactsService],
  exports: [ClientsService],
})
export class ClientsModule {}
