import { Module, type DynamicModule } from '@nestjs/common'
import { LoggerModule } from 'nestjs-pino'
import { Settings } from '../config/settings.js'

/** One line of JSON a request: address without its query, status, time. No headers, no bodies, no secrets. */
@Module({})
export class LoggingModule {
  static create(): DynamicModule {
    return {
      module: LoggingModule,
      imports: [
        LoggerModule.forRootAsync({
          inject: [Settings],
          useFactory: (settings: Settings) => ({
            forRoutes: ['{*path}'],
            pinoHttp: {
              level: settings.logLevel,
              redact: ['password', 'passphrase', 'token', 'secret'].flatMap((name) => [name, `*.${name}`]),
              serializers: {
                req: (request: { id: unknown; method: string; url: string }) => ({
                  id: request.id,
                  method: request.method,
                  url: hideTokens(request.url),
                }),
                res: (response: { statusCode: number }) => ({ status: response.statusCode }),
              },
              customLogLevel: (_request, response, error) => {
                if (error || response.statusCode >= 500) return 'error'
                return response.statusCode >= 400 ? 'warn' : 'info'
              },
              autoLogging: { ignore: (request) => !addressOf(request).startsWith('/api') },
            },
          }),
        }),
      ],
    }
  }
}

/** as it was asked for, whatever part of it a router has taken off */
function addressOf(request: { url?: string | undefined; originalUrl?: string }): string {
  return request.originalUrl ?? request.url ?? ''
}

/** the address without its query and without the secret of a link */
function hideTokens(url: string): string {
  return (url.split('?', 1)[0] ?? '').replaceAll(/\/(invitations|reset)\/[^/]+/g, '/$1/…')
}
