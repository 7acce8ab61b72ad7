import { Module, type DynamicModule } from '@nestjs/common'
import { BenchModule } from './modules/bench/index.js'
import { ClientsModule } from './modules/clients/index.js'
import { HistoryModule } from './modules/history/index.js'
import { InstrumentsModule } from './modules/instruments/index.js'
import { LaboratoryModule } from './modules/laboratory/index.js'
import { MaterialsModule } from './modules/materials/index.js'
import { MethodsModule } from './modules/methods/index.js'
import { ProgrammesModule } from './modules/programmes/index.js'
import { UsersModule } from './modules/users/index.js'
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
]

@Module({})
export class AppModule {
  static create(options: PlatformOptions): DynamicModule {
    return { module: AppModule, imports: [PlatformModule.create(options), ...FEATURES] }
  }
}
