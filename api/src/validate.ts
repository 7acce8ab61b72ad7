import { createHash } from 'node:crypto'
import { join, resolve } from 'node:path'
import { validationDocument } from './modules/quality/index.js'
import validate from './modules/quality/validation-worker.js'
import { writeOutput } from './platform/files/output.js'
import { Clock, DocumentsService } from './platform/index.js'

/** `npm run validate [folder]`: runs every published case and writes the report as PDF and JSON. */
const folder = resolve(process.argv[2] ?? join(process.cwd(), '.data', 'validation'))
const report = validate({ now: new Clock().now().toISOString() })
const documents = new DocumentsService()
const json = Buffer.from(`${JSON.stringify(report, null, 2)}\n`, 'utf8')
const pdf = await documents.render(
  validationDocument(report, { laboratory: 'Run from the command line', by: 'npm run validate' }),
  { timeLimit: 150_000 },
)
await documents.onApplicationShutdown()
writeOutput(join(folder, 'validation.json'), json)
writeOutput(join(folder, 'validation.pdf'), pdf)

console.log(`${report.cases} cases, ${report.comparisons} comparisons, engine ${report.engineVersion}`)
console.log(`JSON SHA-256 ${createHash('sha256').update(json).digest('hex')}`)
console.log(`Written to ${folder}`)
for (const row of report.rows.filter((one) => one.verdict === 'fail'))
  console.log(`FAILED ${row.id}: ${row.title}`)
console.log(`${report.passed} passed, ${report.failed} failed`)
process.exitCode = report.failed > 0 ? 1 : 0
