import { Module } from '@nestjs/common'
import { AlertsModule } from '../alerts/index.js'
import { ClientsModule } from '../clients/index.js'
import { LaboratoryModule } from '../laboratory/index.js'
import { ResultsModule } from '../results/index.js'
import { PortalController } from './portal.controller.js'
import { PortalRepository } from './portal.repository.js'
import { PortalService } from './portal.service.js'

@Module({
  imports: [AlertsModule, ClientsModule, LaboratoryModule, ResultsModule],
  controllers: [PortalController],
  providers: [PortalService, PortalRepository],
})
export class PortalModule {}
