import 'reflect-metadata'
import { NestFactory } from '@nestjs/core'
import type { NestFastifyApplication } from '@nestjs/platform-fastify'
import { AppModule } from './app.module.js'
import { readSettings } from './platform/config/settings.js'
import { configureApp, newAdapter } from './platform/http/app.js'

try {
  const settings = readSettings(process.env)
  const app = await NestFactory.create<NestFastifyApplication>(
    AppModule.create({ settings, isWorker: settings.worker === 'inside', isStrict: true }),
    newAdapter(settings),
    { bufferLogs: true, abortOnError: false },
  )
  await configureApp(app)
  await app.listen({ port: settings.port, host: settings.host })
  console.log(`Weirlight listens on ${await app.getUrl()}`)
} catch (error) {
  console.error(error instanceof Error ? error.message : error)
  process.exit(1)
}
