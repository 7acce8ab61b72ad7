import { mkdirSync, writeFileSync } from 'node:fs'
import { dirname } from 'node:path'

/** For commands that leave files behind; makes the folder. */
export function writeOutput(path: string, content: Buffer): void {
  mkdirSync(dirname(path), { recursive: true })
  writeFileSync(path, content)
}

/** The same, readable by its owner alone. */
export function writeSecret(path: string, content: Buffer): void {
  mkdirSync(dirname(path), { recursive: true })
  writeFileSync(path, content, { mode: 0o600 })
}
