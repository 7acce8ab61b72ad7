import { openPool } from '../platform/database/pool.js'
import type { Agent } from '../testing/agent.js'
import { openLongBatches } from './long-batches.js'
import { lengthenHistory } from './long-history.js'
import { BATCHES_NEEDED, measureBatches } from './measure-batches.js'
import { measureCertificates } from './measure-certificates.js'
import { measureHistory } from './measure-history.js'
import type { Measured } from './measured.js'
import { readBenchSettings, signInByHttp, signInInside, startInside, type BenchSettings } from './product.js'
import { keepReport, linesOf, thisMachine, type Report } from './report.js'
import { scriptSizes } from './script-size.js'
import { listenToSql } from './sql-log.js'

/** `npm run bench`: the running product under load, beside the same SQL and the same PDF without it. */
const OUTER_LIMIT_MS = 15 * 60_000

function accountOf({ accounts }: BenchSettings, role: string) {
  const found = accounts.find((account) => account.role === role)
  if (!found) throw new Error(`The demo laboratory has no ${role}.`)
  return found
}

async function measure(settings: BenchSettings): Promise<Pick<Report, 'measured' | 'entries'>> {
  const log = listenToSql()
  const owner = openPool({ url: settings.ownerUrl, size: 1, name: 'bench owner' })
  const pool = openPool({ url: settings.databaseUrl, size: 8, name: 'bench' })
  const inside = await startInside(settings)
  try {
    const technician = accountOf(settings, 'technician')
    const auditor = accountOf(settings, 'auditor')
    const agent: Agent = await signInInside(inside, technician)
    console.log(`Opening ${BATCHES_NEEDED} batches …`)
    const batches = await openLongBatches(agent, { count: BATCHES_NEEDED, now: new Date() })
    console.log('Lengthening the history …')
    const entries = await lengthenHistory(owner)
    const { url } = settings
    const measured: Measured[] = []
    console.log('Opening and saving batches …')
    const asTechnician = { url, agent, log, pool, headers: await signInByHttp(url, technician) }
    measured.push(...(await measureBatches(asTechnician, batches)))
    console.log('Listing history …')
    const auditing = await signInInside(inside, auditor)
    const asAuditor = { url, log, pool, agent: auditing, headers: await signInByHttp(url, auditor) }
    measured.push(...(await measureHistory({ ...asAuditor, entries })))
    console.log('Rendering certificates …')
    measured.push(...(await measureCertificates(pool)))
    return { measured, entries }
  } finally {
    await inside.close()
    await pool.end()
    await owner.end()
  }
}

setTimeout(() => {
  console.error(`The bench was stopped: it took longer than ${OUTER_LIMIT_MS / 60_000} minutes.`)
  process.exit(1)
}, OUTER_LIMIT_MS).unref()

try {
  const settings = readBenchSettings(process.env)
  const report: Report = {
    at: new Date().toISOString(),
    machine: thisMachine(),
    ...(await measure(settings)),
    scripts: scriptSizes(settings.webDist),
  }
  console.log(['', ...linesOf(report), ''].join('\n'))
  console.log(`Kept as ${keepReport(settings.folder, report)}`)
  process.exit(0)
} catch (error) {
  console.error(error)
  process.exit(1)
}
