import { readdirSync, readFileSync } from 'node:fs'
import type { z } from 'zod'
import { methodDefinition, referenceFiles, type MethodDefinition } from './reference.js'

export const referenceFolder = new URL('../../../fixtures/reference/', import.meta.url)

export function readReference(name: string): unknown {
  return JSON.parse(readFileSync(new URL(name, referenceFolder), 'utf8'))
}

export function readTyped<K extends keyof typeof referenceFiles>(name: K) {
  return referenceFiles[name].parse(readReference(name)) as z.infer<(typeof referenceFiles)[K]>
}

export const methodFiles = readdirSync(new URL('methods/', referenceFolder)).filter((name) =>
  name.endsWith('.json'),
)

export function readMethods(): MethodDefinition[] {
  return methodFiles.map((name) => methodDefinition.parse(readReference(`methods/${name}`)))
}
