import { Module, type DynamicModule } from '@nestjs/common'
import { PlatformModule, type PlatformOptions } from './platform/platform.module.js'

/** Every feature, lower levels first. */
export const FEATURES: NonNullable<DynamicModule['imports']> = []

@Module({})
export class AppModule {
  static create(options: PlatformOptions): DynamicModule {
    return { module: AppModule, imports: [PlatformModule.create(options), ...FEATURES] }
  }
}
