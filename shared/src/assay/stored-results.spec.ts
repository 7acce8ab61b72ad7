import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { validationFunctions } from './validation-functions.js'
import { ENGINE_VERSION } from './version.js'

/*
 * Results stored by an earlier engine of the same major version must come out again bit for bit. JSON keeps every
 * double exactly, and the comparison of numbers here is exact. A change that moves a last digit raises the major version and
 * gets a file of its own.
 */

interface Stored {
  results: { id: string; function: string; input: unknown; result: unknown }[]
}

const major = ENGINE_VERSION.split('.')[0]
const file = new URL(`../../../fixtures/assay/stored/engine-${major}.json`, import.meta.url)
const { results } = JSON.parse(readFileSync(file, 'utf8')) as Stored

function compute(name: string, input: unknown): unknown {
  const given = resolve(input)
  return validationFunctions[name]?.(...(Array.isArray(given) ? given : [given]))
}

function resolve(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(resolve)
  if (typeof value !== 'object' || value === null) return value
  if ('$call' in value && 'input' in value) return compute(String(value.$call), value.input)
  return Object.fromEntries(Object.entries(value).map(([key, part]) => [key, resolve(part)]))
}

describe('results stored by this major version', () => {
  it.each(results.map((entry) => [entry.id, entry] as const))('%s', (_id, entry) => {
    // wrapped, because some results are plain numbers; more keys than were stored are allowed
    expect({ result: compute(entry.function, entry.input) }).toMatchObject({ result: entry.result })
  })
})
