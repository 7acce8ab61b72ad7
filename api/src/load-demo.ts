import { NestFactory } from '@nestjs/core'
import { AppModule } from './app.module.js'
import { Chance } from './demo/chance.js'
import { readDemoData } from './demo/demo-data.js'
import { loadDemo } from './demo/load-demo.js'
import { readSettings } from './platform/config/settings.js'
import { writeSecret } from './platform/files/output.js'

/** `node dist/load-demo.js`: four months of an invented laboratory, written through the services its users use. */
const ownerUrl = process.env['OWNER_DATABASE_URL']
const accountsFile = process.env['DEMO_ACCOUNTS_FILE']
if (!ownerUrl || !accountsFile) {
  console.error(
    'Set OWNER_DATABASE_URL (owns the tables) and DEMO_ACCOUNTS_FILE (where the accounts are written).',
  )
  process.exit(1)
}

try {
  const settings = readSettings({ ...process.env, DATABASE_URL: ownerUrl })
  const app = await NestFactory.createApplicationContext(
    AppModule.create({ settings, isWorker: false, isStrict: false, isOwnerAllowed: true }),
    { logger: ['error'], abortOnError: false },
  )
  try {
    const data = readDemoData()
    const accounts = await loadDemo(app, {
      data,
      chance: new Chance(data.seed),
      say: (line) => console.log(line),
    })
    writeSecret(accountsFile, Buffer.from(`${JSON.stringify({ accounts }, null, 2)}\n`, 'utf8'))
  } finally {
    await app.close()
  }
} catch (error) {
  console.error(error)
  process.exit(1)
}
