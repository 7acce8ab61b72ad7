import { Global, Module, type DynamicModule } from '@nestjs/common'
import { ConfigModule, ConfigService } from '@nestjs/config'
import { Settings, readSettings, type SettingsValues } from './settings.js'

const KEY = 'settings'

@Global()
@Module({})
export class SettingsModule {
  /** @param values given by tests instead of the environment */
  static of(values?: SettingsValues): DynamicModule {
    return {
      module: SettingsModule,
      imports: [
        ConfigModule.forRoot({
          ignoreEnvFile: true,
          cache: true,
          load: [() => ({ [KEY]: values ?? readSettings(process.env) })],
        }),
      ],
      providers: [
        {
          provide: Settings,
          inject: [ConfigService],
          useFactory: (config: ConfigService) => config.getOrThrow<SettingsValues>(KEY),
        },
      ],
      exports: [Settings],
    }
  }
}
