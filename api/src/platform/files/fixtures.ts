import { readdirSync, readFileSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'

/** `fixtures/`, both from src/platform/files and from dist/platform/files */
const FIXTURES = join(dirname(fileURLToPath(import.meta.url)), '../../../../fixtures')

/** `readFixture('reference/limits.json')`: parsed, not yet checked. */
export function readFixture(path: string): unknown {
  return JSON.parse(readFileSync(join(FIXTURES, path), 'utf8')) as unknown
}

/** The JSON files of a folder, in the order of their names. */
export function listFixtures(folder: string): string[] {
  return readdirSync(join(FIXTURES, folder))
    .filter((file) => file.endsWith('.json'))
    .sort()
    .map((file) => `${folder}/${file}`)
}
