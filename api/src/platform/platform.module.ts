import { Global, Module, type DynamicModule, type Provider } from '@nestjs/common'
import {
  APP_FILTER,
  APP_GUARD,
  APP_INTERCEPTOR,
  DiscoveryModule,
  DiscoveryService,
  MetadataScanner,
  Reflector,
} from '@nestjs/core'
import { Clock } from './clock/clock.js'
import { SettingsModule } from './config/settings.module.js'
import { Settings, type SettingsValues } from './config/settings.js'
import { Database } from './database/database.js'
import { openPool } from './database/pool.js'
import { RoleCheck } from './database/role-check.js'
import { RoleRepository } from './database/role.repository.js'
import { DocumentsService } from './documents/documents.service.js'
import { EventsModule } from './events/events.module.js'
import { HealthController } from './health/health.controller.js'
import { HealthRepository } from './health/health.repository.js'
import { HealthService } from './health/health.service.js'
import { AccessGuard } from './http/access.guard.js'
import { EndpointInterceptor } from './http/endpoint.interceptor.js'
import { ProblemFilter } from './http/problem.filter.js'
import { RouteCheck } from './http/route-check.js'
import { JobHandlers } from './jobs/handlers.js'
import { JobsRepository } from './jobs/jobs.repository.js'
import { JobsService } from './jobs/jobs.service.js'
import { LoggingModule } from './logging/logging.module.js'
import { MailSender } from './mail/mail-sender.js'
import { MailTransport } from './mail/mail-transport.js'
import { MailRepository } from './mail/mail.repository.js'
import { MailService } from './mail/mail.service.js'
import { ActorsRepository } from './sessions/actors.repository.js'
import { SessionService } from './sessions/session.service.js'
import { SealsWorker } from './seals/seals.jobs.js'
import { SealsRepository } from './seals/seals.repository.js'
import { SealsService } from './seals/seals.service.js'
import { SheetsService } from './sheets/sheets.service.js'
import { SignInAttemptsRepository } from './sessions/sign-in-attempts.repository.js'
import { SignInThrottle } from './sessions/sign-in-throttle.js'

export interface PlatformOptions {
  /** instead of the environment, for tests */
  settings?: SettingsValues
  /** works on jobs in this process */
  isWorker: boolean
  /** refuses to start while contracts, routes, jobs and handlers do not fit; off in tests of one module */
  isStrict: boolean
  /** for the loader of the demonstration's past alone */
  isOwnerAllowed?: boolean
}

const services = [
  RoleRepository,
  Clock,
  ActorsRepository,
  SessionService,
  SignInAttemptsRepository,
  SignInThrottle,
  JobHandlers,
  JobsRepository,
  SealsRepository,
  SealsService,
  SealsWorker,
  DocumentsService,
  SheetsService,
  MailTransport,
  MailRepository,
  MailService,
  MailSender,
  HealthRepository,
  HealthService,
]

/** Everything that knows no feature; a feature's module needs to import nothing to use it. */
@Global()
@Module({})
export class PlatformModule {
  static create(options: PlatformOptions): DynamicModule {
    const built: Provider[] = [
      {
        provide: Database,
        inject: [Settings, Clock],
        useFactory: (settings: Settings, clock: Clock) =>
          openDatabase(settings, { clock, followsPinnedClock: options.isOwnerAllowed ?? false }),
      },
      {
        provide: JobsService,
        inject: [JobHandlers, JobsRepository, Settings],
        useFactory: (handlers: JobHandlers, repository: JobsRepository, settings: Settings) =>
          new JobsService(handlers, repository, options, settings),
      },
      {
        provide: RoleCheck,
        inject: [Database, RoleRepository],
        useFactory: (db: Database, roles: RoleRepository) =>
          new RoleCheck(db, roles, { isOwnerAllowed: options.isOwnerAllowed ?? false }),
      },
      {
        provide: RouteCheck,
        inject: [DiscoveryService, MetadataScanner, Reflector, Settings],
        useFactory: (
          discovery: DiscoveryService,
          scanner: MetadataScanner,
          reflector: Reflector,
          settings: Settings,
        ) =>
          new RouteCheck(discovery, scanner, reflector, {
            isStrict: options.isStrict && !settings.isPartial,
          }),
      },
    ]
    return {
      module: PlatformModule,
      imports: [SettingsModule.of(options.settings), LoggingModule.create(), DiscoveryModule, EventsModule],
      controllers: [HealthController],
      providers: [
        ...services,
        ...built,
        { provide: APP_GUARD, useClass: AccessGuard },
        { provide: APP_INTERCEPTOR, useClass: EndpointInterceptor },
        { provide: APP_FILTER, useClass: ProblemFilter },
      ],
      exports: [...services, Database, JobsService, RouteCheck],
    }
  }
}

function openDatabase(
  settings: Settings,
  { clock, followsPinnedClock }: { clock: Clock; followsPinnedClock: boolean },
): Database {
  const pool = openPool({ url: settings.databaseUrl, size: settings.databasePool, name: 'weirlight' })
  const readPool = settings.databaseReadUrl
    ? openPool({ url: settings.databaseReadUrl, size: settings.databasePool, name: 'weirlight-read' })
    : undefined
  return new Database({ pool, readPool, clock, followsPinnedClock })
}
