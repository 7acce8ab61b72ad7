import { spawnSync } from 'node:child_process'
import { readFileSync, writeFileSync } from 'node:fs'
import { createRequire } from 'node:module'
import { tmpdir } from 'node:os'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'

export const TYPES_FILE = join(dirname(fileURLToPath(import.meta.url)), 'types.gen.ts')

/** The types of every table, as the database at `url` has them. */
export function generateTypes(url: string): string {
  const outFile = join(tmpdir(), `weirlight-types-${process.pid}.ts`)
  const cli = createRequire(import.meta.url).resolve('kysely-codegen/dist/cli/bin.js')
  const run = spawnSync(
    process.execPath,
    [
      cli,
      '--dialect=postgres',
      `--url=${url}`,
      `--out-file=${outFile}`,
      '--camel-case',
      '--date-parser=string',
      '--numeric-parser=string',
      '--default-schema=public',
      '--include-pattern=public.*',
      '--exclude-pattern=public.{migrations,migrations_lock,migration_checksums}',
    ],
    { encoding: 'utf8' },
  )
  if (run.status !== 0) throw new Error(`kysely-codegen failed:\n${run.stdout}\n${run.stderr}`)
  return readFileSync(outFile, 'utf8')
}

export function writeTypes(url: string): void {
  writeFileSync(TYPES_FILE, generateTypes(url))
}
