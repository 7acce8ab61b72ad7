import { Module, type DynamicModule } from '@nestjs/common'
import { BatchesModule } from './modules/batches/index.js'
import { BenchModule } from './modules/bench/index.js'
import { CalibrationsModule } from './modules/calibrations/index.js'
import { ClientsModule } from './modules/clients/index.js'
import { HistoryModule } from './modules/history/index.js'
import { InstrumentsModule } from './modules/instruments/index.js'
import { LaboratoryModule } from './modules/laboratory/index.js'
import { MaterialsModule } from './modules/materials/index.js'
import { MethodsModule } from './modules/methods/index.js'
import { ProgrammesModule } from './modules/programmes/index.js'
import { SamplesModule } from './modules/samples/index.js'
import { UsersModule } from './modules/users/index.js'
import { ResultsModule } from './modules/results/index.js'
import { AlertsModule } from './modules/alerts/index.js'
import { CertificatesModule } from './modules/certificates/index.js'
import { PortalModule } from './modules/portal/index.js'
import { TodayModule } from './modules/today/index.js'
import { OutgoingMailModule } from './modules/outgoing-mail/index.js'
import { QualityModule } from './modules/quality/index.js'
import { EventsModule } from './platform/events/events.module.js'
import { PlatformModule, type PlatformOptions } from './platform/platform.module.js'

/** Every feature, lower levels first. */
export const FEATURES: NonNullable<DynamicModule['imports']> = [
  EventsModule,
  HistoryModule,
  LaboratoryModule,
  UsersModule,
  ClientsModule,
  MethodsModule,
  ProgrammesModule,
  MaterialsModule,
  InstrumentsModule,
  BenchModule,
  SamplesModule,
  CalibrationsModule,
  BatchesModule,
  ResultsModule,
  AlertsModule,
  CertificatesModule,
  PortalModule,
  TodayModule,
  OutgoingMailModule,
  QualityModule,
]

@Module({})
export class AppModule {
  static create(options: PlatformOptions): DynamicModule {
    return { module: AppModule, imports: [PlatformModule.create(options), ...FEATURES] }
  }
}
