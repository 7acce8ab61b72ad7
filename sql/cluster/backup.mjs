// npm run backup -- --to <folder>: the whole database, certificates and history with it, in one file with its
// SHA-256 beside it. Works while the product runs.

import { chmodSync, existsSync, mkdirSync, renameSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { basename, join, resolve } from 'node:path'
import { readArguments } from './arguments.mjs'
import { undoStack } from './launch.mjs'
import { borrowCluster, environmentOf, hasCluster, sha256Of } from './own-database.mjs'
import { checkoutHome } from './places.mjs'
import { ensurePostgres } from './postgres.mjs'
import { run } from './processes.mjs'
import { Refusal, say, step } from './say.mjs'
import { runToEnd } from './signals.mjs'

const help = `npm run backup -- --to <folder>

Writes weirlight-<time>.dump and weirlight-<time>.dump.sha256 into the folder.
It reads the database of OWNER_DATABASE_URL; when that is not set, this checkout's own.`

const undo = undoStack()

/** Which database, and as whom: everything must be readable, so the owner of the one, the admin of our own. */
const source = async () => {
  const address = process.env.OWNER_DATABASE_URL ?? process.env.DATABASE_URL
  if (address) return { env: environmentOf(address), bin: (await ensurePostgres()).bin }
  if (!hasCluster(await checkoutHome())) {
    throw new Refusal(
      'This checkout has no database yet, and OWNER_DATABASE_URL is not set: nothing to back up.',
    )
  }
  const { cluster } = await borrowCluster({ command: 'npm run backup', undo })
  return { env: cluster.connectionEnv('admin', 'weirlight'), bin: cluster.bin }
}

const work = async () => {
  const { to } = readArguments({ options: { to: { type: 'string' } }, required: ['to'], help })
  // npm runs this in the checkout; a relative folder is meant from where the command was typed.
  const folder = resolve(process.env.INIT_CWD ?? '.', to)
  mkdirSync(folder, { recursive: true })
  const stamp = new Date().toISOString().replaceAll(/[-:]|\.\d+/g, '')
  const file = join(folder, `weirlight-${stamp}.dump`)
  if (existsSync(file)) throw new Refusal(`${file} exists already.`)
  const unfinished = `${file}.unfinished`
  undo.push(() => rmSync(unfinished, { force: true }))

  const { env, bin } = await source()
  const programEnv = { ...process.env, ...env }
  await step('Writing the backup', async () => {
    const args = ['--format=custom', '--no-password', `--file=${unfinished}`]
    const dump = await run(join(bin, 'pg_dump'), args, { env: programEnv })
    if (dump.code !== 0) throw new Refusal(`pg_dump failed:\n${dump.output}`)
    const list = await run(join(bin, 'pg_restore'), ['--list', unfinished])
    if (list.code !== 0) throw new Refusal(`The backup cannot be read back:\n${list.output}`)
    // Whoever reads it has every client's results and every account's hash.
    chmodSync(unfinished, 0o600)
    renameSync(unfinished, file)
  })
  const sum = await sha256Of(file)
  writeFileSync(`${file}.sha256`, `${sum}  ${basename(file)}\n`)
  say(`\n  ${file}\n  ${(statSync(file).size / 1e6).toFixed(1)} MB, SHA-256 ${sum}`)
  say(`\nKeep a copy on another machine, and try once that it restores: npm run restore -- --from ${file}`)
  return 0
}

await runToEnd({ undo, work })
