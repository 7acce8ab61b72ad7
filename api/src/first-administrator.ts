import { parseArgs } from 'node:util'
import { NestFactory } from '@nestjs/core'
import { email as emailRule, name as nameRule } from '@weirlight/shared/contracts'
import { AppModule } from './app.module.js'
import { FirstAdministratorService } from './modules/users/index.js'
import { readSettings } from './platform/config/settings.js'

const USE = `npm run first-administrator -w api -- --email you@lab.example --name "Your Name"
  [--laboratory "The laboratory's name"] [--time-zone Europe/Vienna]`

/** Invites an administrator into a laboratory in which nobody can invite anybody yet. */
try {
  const { values } = parseArgs({
    options: {
      email: { type: 'string' },
      name: { type: 'string' },
      laboratory: { type: 'string', default: 'Our laboratory' },
      // for good once set: every time that people see is shown in it
      'time-zone': { type: 'string', default: Intl.DateTimeFormat().resolvedOptions().timeZone },
    },
  })
  const person = { email: emailRule.safeParse(values.email), name: nameRule.safeParse(values.name) }
  const timeZone = values['time-zone']
  if (!person.email.success || !person.name.success)
    throw new Error(`Give a name and a complete address:\n  ${USE}`)
  if (!isTimeZone(timeZone)) throw new Error(`“${timeZone}” is not the name of a time zone.\n  ${USE}`)
  const app = await NestFactory.createApplicationContext(
    AppModule.create({ settings: readSettings(process.env), isWorker: false, isStrict: false }),
    { logger: ['error'], abortOnError: false },
  )
  try {
    const link = await app.get(FirstAdministratorService).invite({
      email: person.email.data,
      name: person.name.data,
      laboratory: { name: values.laboratory, timeZone },
    })
    console.log(
      `${person.name.data} is invited as administrator. The link works once, for seven days:\n\n${link}\n`,
    )
    console.log(`It also goes to ${person.email.data} by mail, as soon as the application runs.`)
  } finally {
    await app.close()
  }
} catch (error) {
  console.error(error instanceof Error ? error.message : error)
  process.exit(1)
}

function isTimeZone(zone: string): boolean {
  try {
    return Boolean(new Intl.DateTimeFormat('en', { timeZone: zone }))
  } catch {
    return false
  }
}
