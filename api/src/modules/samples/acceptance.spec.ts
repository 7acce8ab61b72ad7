import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { holdTimeRuleDefinition, methodDefinition } from '@weirlight/shared/reference'
import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { checkAcceptance, type SampleToCheck } from './acceptance.js'
import { holdingAt, holdingOf } from './holding.js'
import type { MethodRules } from './method-rules.js'

// Rules from fixtures/reference (each with its source); samples and their expected verdicts are constructed.
const FOLDER = fileURLToPath(new URL('../../../../fixtures/reference/', import.meta.url))
const read = (file: string): unknown => JSON.parse(readFileSync(`${FOLDER}${file}`, 'utf8'))
const rules = z.array(holdTimeRuleDefinition).parse(read('hold-time-rules.json'))

function method(file: string, changes: Partial<MethodRules> = {}): MethodRules {
  const definition = methodDefinition.parse(read(`methods/${file}.json`))
  const holdTime = rules.find(({ code }) => code === definition.holdTimeRule)
  if (!holdTime) throw new Error('no rule')
  const { title, analyte, form, container, approvals } = definition
  return { id: file, title, analyte, form, active: true, container, approvals, holdTime, ...changes }
}
const iron = method('fe-phenanthroline')
const chromium = method('cr6-diphenylcarbazide')

const good: SampleToCheck = {
  purpose: 'operational',
  programmeCode: 'us-drinking-water',
  clientActive: true,
  pointActive: true,
  collectedAt: new Date('2026-11-30T08:00:00Z'),
  receivedAt: new Date('2026-11-30T12:00:00Z'),
  collectedBy: 'R. Sampler',
  preservation: 'nitric-acid',
  ph: '1.6',
  temperatureC: '',
  container: 'plastic',
  filteredInField: false,
  methods: [iron],
}
const at = new Date('2026-11-30T14:00:00Z')
const failing = (sample: SampleToCheck, when = at) => {
  const { checks, suggested } = checkAcceptance(sample, when)
  return {
    suggested,
    failed: checks.filter(({ ok }) => !ok).map(({ check, finding }) => `${check}: ${finding}`),
  }
}

describe('acceptance', () => {
  it('an operational sample in order is accepted, with the time left', () => {
    expect(failing(good)).toEqual({ suggested: 'accepted', failed: [] })
    const left = checkAcceptance(good, at).checks.find(({ check }) => check.startsWith('Holding time'))
    expect(left?.finding).toBe('179 days left of 180 days.')
  })
  it('a compliance sample needs a method that its programme allows', () => {
    const outcome = failing({ ...good, purpose: 'compliance' })
    expect(outcome.suggested).toBe('rejected')
    expect(outcome.failed[0]).toContain('Not represented as a compliance result')
    expect(failing({ ...good, purpose: 'compliance', programmeCode: 'us-wastewater' })).toEqual({
      suggested: 'accepted',
      failed: [],
    })
  })
  it('where the authority must be asked, a compliance sample is qualified', () => {
    expect(failing({ ...good, purpose: 'compliance', programmeCode: 'eu-drinking-water' }).suggested).toBe(
      'accepted-with-qualification',
    )
  })
  it.each([
    ['pH above what the rule needs', { ph: '2.4' }, 'pH 2.4 with nitric acid; at most 1.99 is needed'],
    ['no pH measured', { ph: '' }, 'Nitric acid was not verified'],
    [
      'wrong preservation',
      { preservation: 'ammonium-sulfate-buffer' as const },
      'does not allow ammonium sulfate buffer',
    ],
    ['collected in the future', { collectedAt: new Date('2026-12-05T00:00:00Z') }, 'Collected in the future'],
    ['received before collected', { receivedAt: new Date('2026-11-30T07:00:00Z') }, 'Received before'],
    ['no collector', { collectedBy: ' ' }, 'Missing: who collected it.'],
    ['a closed point', { pointActive: false }, 'no longer in use'],
    ['a closed client', { clientActive: false }, 'no longer active'],
  ])('%s is found', (_, change, finding) => {
    const operational = failing({ ...good, ...change })
    expect(operational.failed.join()).toContain(finding)
    expect(operational.suggested).toBe('accepted-with-qualification')
  })
  it('a failed compliance sample is rejected', () => {
    const compliance = { ...good, purpose: 'compliance' as const, programmeCode: 'us-wastewater' }
    expect(failing({ ...compliance, ph: '2.4' }).suggested).toBe('rejected')
    expect(failing({ ...compliance, pointActive: false }).suggested).toBe('accepted-with-qualification')
  })
  it('a dissolved metal needs filtration in the field', () => {
    const dissolved = method('fe-phenanthroline', { form: 'dissolved' })
    expect(failing({ ...good, methods: [dissolved] }).failed).toEqual([
      'Filtered in the field: A dissolved metal is wanted, and no filtration in the field is recorded.',
    ])
    expect(failing({ ...good, methods: [dissolved], filteredInField: true }).failed).toEqual([])
  })
  it('a container that the method does not name is found', () => {
    const fluoropolymerOnly = method('fe-phenanthroline', { container: 'fluoropolymer' })
    expect(failing({ ...good, methods: [fluoropolymerOnly] }).failed[0]).toContain('needs fluoropolymer')
  })

  // 24 h against 28 days: SW-846 7196A and 40 CFR 136.3 Table II note 20, as read in fixtures/reference
  describe('chromium(VI)', () => {
    const buffered: SampleToCheck = {
      ...good,
      methods: [chromium],
      preservation: 'ammonium-sulfate-buffer',
      ph: '9.5',
      temperatureC: '4.0',
    }
    it('keeps 28 days in the verified buffer, cold', () => {
      expect(failing(buffered, new Date('2026-12-20T08:00:00Z'))).toEqual({
        suggested: 'accepted',
        failed: [],
      })
    })
    it('falls back to 24 hours when the buffer is not verified', () => {
      const outcome = failing({ ...buffered, ph: '9.0' }, new Date('2026-12-02T08:00:00Z'))
      expect(outcome.failed).toEqual([
        'Holding time: Chromium(VI) by 1,5-diphenylcarbazide: Over by 24 h 0 min; 24 h 0 min were allowed.',
        'Preservation: chromium-vi: pH 9.0 with ammonium sulfate buffer; 9.3 to 9.7 is needed; 24 h 0 min of holding time count instead.',
      ])
    })
    it('too warm, or no temperature at all, is found', () => {
      expect(failing({ ...buffered, temperatureC: '9.5' }).failed.join()).toContain('9.5 °C; at most 6 °C')
      expect(failing({ ...buffered, temperatureC: '' }).failed.join()).toContain('Not recorded; at most 6 °C')
    })
    it('acid destroys it: nitric acid is refused', () => {
      expect(failing({ ...buffered, preservation: 'nitric-acid', ph: '1.5' }).failed.join()).toContain(
        'does not allow nitric acid',
      )
    })
  })
})

describe('holding time', () => {
  const kept = { ...good, collectedAt: new Date('2026-11-30T08:00:00Z') }
  it('is kept with the rule that gave it', () => {
    expect(holdingOf(kept, iron.holdTime)).toEqual({
      dueAt: new Date('2027-05-29T08:00:00Z'),
      ruleText: '180 days from collection (metals in acid, preserved: nitric acid)',
    })
    expect(holdingOf({ ...kept, ph: '' }, iron.holdTime).ruleText).toBe(
      '14 days from collection (metals in acid, the rule without conditions)',
    )
  })
  it('stands as kept, whatever the rule says now', () => {
    const dueAt = new Date('2026-12-01T08:00:00Z')
    const base = { collectedAt: kept.collectedAt, dueAt, ruleText: 'x', soonWithinHours: 6 }
    expect(holdingAt({ ...base, at: new Date('2026-12-01T01:00:00Z') }).state).toBe('ok')
    expect(holdingAt({ ...base, at: new Date('2026-12-01T02:30:00Z') })).toMatchObject({
      state: 'soon',
      remainingHours: 5.5,
    })
    expect(holdingAt({ ...base, at: new Date('2026-12-01T09:00:00Z') }).state).toBe('breached')
  })
})
