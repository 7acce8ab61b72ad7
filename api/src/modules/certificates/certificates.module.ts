import { Module } from '@nestjs/common'
import { LaboratoryModule } from '../laboratory/index.js'
import { ResultsModule } from '../results/index.js'
import { UsersModule } from '../users/index.js'
import { CertificatesController } from './certificates.controller.js'
import { CertificatesRepository } from './certificates.repository.js'
import { CertificatesService } from './certificates.service.js'
import { IssuingService } from './issuing.service.js'
import { RenderingService } from './rendering.service.js'

@Module({
  imports: [LaboratoryModule, ResultsModule, UsersModule],
  controllers: [CertificatesController],
  providers: [CertificatesService, CertificatesRepository, IssuingService, RenderingService],
})
export class CertificatesModule {}
