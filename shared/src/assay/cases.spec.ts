import { readdirSync, readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { factMark } from '../contracts/reference.js'
import { runValidationCases, type ValidationCase } from './validation.js'

const folder = new URL('../../../fixtures/assay/cases/', import.meta.url)
const files = readdirSync(folder).filter((name) => name.endsWith('.json'))

function readCases(name: string): ValidationCase[] {
  return JSON.parse(readFileSync(new URL(name, folder), 'utf8')) as ValidationCase[]
}

describe.each(files)('published cases of %s', (name) => {
  const cases = readCases(name)

  it.each(cases.map((entry) => [entry.id, entry] as const))('%s', (_id, entry) => {
    const [row] = runValidationCases([entry], { now: '2026-12-01T00:00:00Z' }).rows
    expect(row?.checks.filter((check) => check.verdict === 'fail')).toEqual([])
  })

  it('names a source and a mark for every case', () => {
    for (const entry of cases) {
      expect(entry.source.length, entry.id).toBeGreaterThan(3)
      expect(factMark.safeParse(entry.mark).success, `${entry.id}: ${entry.mark}`).toBe(true)
    }
  })
})

it('has no id twice over all files', () => {
  const ids = files.flatMap((name) => readCases(name).map((entry) => entry.id))
  expect(ids.filter((id, index) => ids.indexOf(id) !== index)).toEqual([])
})
