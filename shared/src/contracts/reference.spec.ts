import { readdirSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { holdTime } from '../assay/hold-time.js'
import { compareWithLimit } from '../assay/compare-with-limit.js'
import { methodDefinition, referenceFiles } from './reference.js'
import {
  methodFiles,
  readMethods,
  readReference,
  readTyped,
  referenceFolder,
} from './reference.test-support.js'

const duplicates = (codes: string[]) => codes.filter((code, index) => codes.indexOf(code) !== index)

describe('reference data', () => {
  it('has a schema for every file and a file for every schema', () => {
    const files = readdirSync(referenceFolder).filter((name) => name.endsWith('.json'))
    expect(files.sort()).toEqual(Object.keys(referenceFiles).sort())
  })

  it.each(Object.entries(referenceFiles))('%s parses', (name, schema) => {
    const outcome = schema.safeParse(readReference(name))
    expect(outcome.error?.issues ?? []).toEqual([])
  })

  it.each(methodFiles)('methods/%s parses and is named after its code', (name) => {
    const outcome = methodDefinition.safeParse(readReference(`methods/${name}`))
    expect(outcome.error?.issues ?? []).toEqual([])
    expect(outcome.data?.code).toBe(name.replace('.json', ''))
  })

  it('has no code twice', () => {
    for (const rows of [
      readTyped('limits.json'),
      readTyped('programmes.json'),
      readTyped('clocks.json'),
      readTyped('calendar-duties.json'),
      readTyped('hold-time-rules.json'),
      readMethods(),
    ]) {
      expect(duplicates(rows.map((row) => row.code))).toEqual([])
    }
  })

  it('names only limits, clocks, programmes and holding times that exist', () => {
    const limits = new Set(readTyped('limits.json').map((row) => row.code))
    const clocks = new Set(readTyped('clocks.json').map((row) => row.code))
    const programmes = new Set(readTyped('programmes.json').map((row) => row.code))
    const rules = new Map(readTyped('hold-time-rules.json').map((row) => [row.code, row]))
    for (const programme of readTyped('programmes.json')) {
      expect(programme.limits.filter((code) => !limits.has(code))).toEqual([])
      expect(programme.clocks.filter((code) => !clocks.has(code))).toEqual([])
    }
    for (const method of readMethods()) {
      expect(method.approvals.filter((row) => !programmes.has(row.programme))).toEqual([])
      const rule = rules.get(method.holdTimeRule)
      expect(rule?.analytes, method.code).toContain(method.analyte)
      expect(rule?.forms, method.code).toContain(method.form)
    }
  })

  it('says for every programme whether a method counts there', () => {
    const programmes = readTyped('programmes.json').map((row) => row.code)
    for (const method of readMethods()) {
      const said = method.approvals.filter((row) => row.form === method.form).map((row) => row.programme)
      expect(said.sort(), method.code).toEqual([...programmes].sort())
    }
  })

  // 40 CFR 141.23(k)(1), 143.4(b): no colour-forming method is listed for these metals in drinking water
  it('approves no colour method for US drinking water', () => {
    for (const method of readMethods()) {
      for (const row of method.approvals.filter((one) => one.programme.endsWith('drinking-water'))) {
        expect(row.status, `${method.code} in ${row.programme}`).not.toBe('approved')
      }
    }
  })

  it('keeps the limits of one analyte and name in one place from overlapping in time', () => {
    const rows = readTyped('limits.json')
    for (const a of rows) {
      for (const b of rows) {
        if (a === b || a.place !== b.place || a.analyte !== b.analyte) continue
        if (a.form !== b.form || a.kind !== b.kind) continue
        const apart =
          (a.validUntil !== null && a.validUntil <= b.validFrom) ||
          (b.validUntil !== null && b.validUntil <= a.validFrom)
        expect(apart, `${a.code} and ${b.code}`).toBe(true)
      }
    }
  })

  it('gives every limit a rule the engine can apply to it', () => {
    for (const limit of readTyped('limits.json')) {
      const value = Number(limit.value)
      const verdict = compareWithLimit({
        value,
        expandedUncertainty: value / 10,
        limit: value,
        rule: limit.decisionRule,
        ...(limit.guardFactor === null ? {} : { guardFactor: limit.guardFactor }),
        rounding: { to: 'significant', digits: limit.digits, ties: limit.ties },
      }).verdict
      expect(['below', 'conditional-below'], limit.code).toContain(verdict)
    }
  })

  it('gives every holding time a rule the engine can apply', () => {
    for (const { rule, code } of readTyped('hold-time-rules.json')) {
      const input = { collectedAt: '2026-01-01T00:00:00Z', preservation: 'none', at: '2026-01-01T01:00:00Z' }
      expect(holdTime({ ...input, rule }).hours, code).toBe(rule.hours)
    }
  })
})
