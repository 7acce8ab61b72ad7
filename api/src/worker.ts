import 'reflect-metadata'
import { NestFactory } from '@nestjs/core'
import { Logger } from 'nestjs-pino'
import { AppModule } from './app.module.js'
import { readSettings } from './platform/config/settings.js'

/** Works on jobs alone; any number of these beside any number of APIs. */
try {
  const settings = readSettings(process.env)
  const app = await NestFactory.createApplicationContext(
    AppModule.create({ settings, isWorker: true, isStrict: true }),
    { bufferLogs: true, abortOnError: false },
  )
  app.useLogger(app.get(Logger))
  app.enableShutdownHooks(['SIGINT', 'SIGTERM'])
  console.log('The worker waits for jobs.')
} catch (error) {
  console.error(error instanceof Error ? error.message : error)
  process.exit(1)
}
