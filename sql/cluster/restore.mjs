// npm run restore -- --from <file>: puts a backup into an empty database. Checks its SHA-256 first, says what it
// is about to do, and does it only with --yes.

import { existsSync, readFileSync, rmSync } from 'node:fs'
import { join, resolve } from 'node:path'
import { readArguments } from './arguments.mjs'
import { markRestored } from './database.mjs'
import { undoStack } from './launch.mjs'
import { borrowCluster, environmentOf, sha256Of } from './own-database.mjs'
import { inData } from './paths.mjs'
import { ensurePostgres } from './postgres.mjs'
import { run } from './processes.mjs'
import { Refusal, say, step } from './say.mjs'
import { runToEnd } from './signals.mjs'

const help = `npm run restore -- --from <file.dump> [--yes]

Restores into the database of OWNER_DATABASE_URL; when that is not set, into this checkout's own.
The database must be empty. Without --yes it only says what it would do.`

const undo = undoStack()

const verify = async (file) => {
  if (!existsSync(file)) throw new Refusal(`There is no ${file}.`)
  if (!existsSync(`${file}.sha256`)) {
    throw new Refusal(`${file}.sha256 is missing: without it nobody can say that the backup is whole.`)
  }
  const stated = readFileSync(`${file}.sha256`, 'utf8').trim().split(/\s+/)[0]
  const sum = await sha256Of(file)
  if (sum !== stated)
    throw new Refusal(`The backup is damaged.\n  its SHA-256  ${sum}\n  as recorded  ${stated}`)
  return sum
}

/** Where to: the database that the environment names, or this checkout's own, made when missing. */
const target = async () => {
  const address = process.env.OWNER_DATABASE_URL ?? process.env.DATABASE_URL
  if (address) {
    const env = environmentOf(address)
    return {
      env,
      bin: (await ensurePostgres()).bin,
      name: `the database ${env.PGDATABASE} on ${env.PGHOST}:${env.PGPORT}`,
    }
  }
  const { home, cluster, holder } = await borrowCluster({ command: 'npm run restore', undo })
  if (holder)
    throw new Refusal(`'${holder.command}' runs on this checkout's database. Stop it first with Ctrl-C.`)
  const env = cluster.connectionEnv('admin', 'weirlight')
  const prepare = async () => {
    if (!(await cluster.hasDatabase('weirlight'))) await cluster.createDatabase('weirlight')
  }
  const isThere = await cluster.hasDatabase('weirlight')
  return {
    env,
    bin: cluster.bin,
    name: "this checkout's own database",
    prepare,
    isThere,
    done: () => {
      markRestored(home)
      rmSync(inData('demo-accounts.json'), { force: true })
    },
  }
}

const demandEmpty = async ({ env, bin, name }) => {
  const question = `select count(*) from pg_class c join pg_namespace n on n.oid = c.relnamespace
    where c.relkind in ('r', 'p', 'v', 'm', 'S') and n.nspname !~ '^(pg_|information_schema)'`
  const answer = await run(join(bin, 'psql'), ['-X', '-A', '-t', '-c', question], { env })
  if (answer.code !== 0) throw new Refusal(`The database cannot be asked:\n${answer.output}`)
  if (answer.stdout.trim() === '0') return
  throw new Refusal(
    `A restore never writes over anything, and ${name} is not empty.\n` +
      'Make an empty one and name it in OWNER_DATABASE_URL, or restore in a fresh clone.',
  )
}

const work = async () => {
  const options = { from: { type: 'string' }, yes: { type: 'boolean', default: false } }
  const { from, yes } = readArguments({ options, required: ['from'], help })
  const file = resolve(process.env.INIT_CWD ?? '.', from)
  const sum = await verify(file)
  const to = await target()
  const env = { ...process.env, ...to.env }
  if (to.isThere !== false) await demandEmpty({ ...to, env })

  say(`\n  From   ${file} (SHA-256 ${sum}, as recorded)`)
  say(`  Into   ${to.name}, which is empty`)
  if (!yes) {
    say('\nNothing was done. Add --yes to do it.')
    return 0
  }
  await to.prepare?.()
  await step('Restoring', async () => {
    const args = [
      '--single-transaction',
      '--exit-on-error',
      '--no-password',
      `--dbname=${env.PGDATABASE}`,
      file,
    ]
    const answer = await run(join(to.bin, 'pg_restore'), args, { env })
    if (answer.code !== 0) throw new Refusal(`pg_restore failed; nothing was changed:\n${answer.output}`)
  })
  await run(join(to.bin, 'psql'), ['-X', '-q', '-c', 'analyze'], { env })
  to.done?.()
  say('\nRestored. Start the application as usual; it runs the migrations that are newer than the backup.')
  return 0
}

await runToEnd({ undo, work })
