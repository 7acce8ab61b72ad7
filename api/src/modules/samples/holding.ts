import { holdTime, type HoldTimeRule } from '@weirlight/shared/assay'
import type { holdingTime } from '@weirlight/shared/contracts'
import type { z } from 'zod'
import type { HoldRule } from './method-rules.js'

export type HoldingView = z.infer<typeof holdingTime>

const HOUR = 3_600_000

export interface Kept {
  collectedAt: Date
  preservation: string
  /** as typed, empty when not measured */
  ph: string
  temperatureC: string
}

const numberOf = (text: string) => (text.trim() === '' ? null : Number(text))

/** A condition left out counts as absent, not as undefined. */
export function engineRule({ rule }: Pick<HoldRule, 'rule'>): HoldTimeRule {
  return {
    hours: rule.hours,
    soonWithinHours: rule.soonWithinHours,
    conditions: rule.conditions.map(({ preservation, hours, minPH, maxPH, maxTemperatureC }) => ({
      preservation,
      hours,
      ...(minPH === undefined ? {} : { minPH }),
      ...(maxPH === undefined ? {} : { maxPH }),
      ...(maxTemperatureC === undefined ? {} : { maxTemperatureC }),
    })),
  }
}

const inWords = (hours: number) => (hours % 24 === 0 && hours > 48 ? `${hours / 24} days` : `${hours} hours`)

/** `metals-in-acid`, `chromium-vi`: people read it on the sample and on the story of a number. */
const codeInWords = (code: string) => code.replace(/^chromium-vi$/, 'chromium(VI)').replaceAll('-', ' ')

/** Until when the sample may be read, by the rule as it stands now; the words are kept with the determination. */
export function holdingOf(kept: Kept, hold: HoldRule): { dueAt: Date; ruleText: string } {
  const found = holdTime({
    collectedAt: kept.collectedAt,
    preservation: {
      kind: kept.preservation,
      pH: numberOf(kept.ph),
      temperatureC: numberOf(kept.temperatureC),
    },
    rule: engineRule(hold),
    at: kept.collectedAt,
  })
  return {
    dueAt: new Date(found.dueAt),
    ruleText: `${inWords(found.hours)} from collection (${codeInWords(hold.code)}, ${found.because.replaceAll('-', ' ')})`,
  }
}

/**
 * How a kept due time stands at a moment. The rule that was applied at receipt decides when it ends; the method's
 * present rule only says how early to warn.
 */
export function holdingAt(input: {
  collectedAt: Date
  dueAt: Date
  ruleText: string
  soonWithinHours: number | null
  at: Date
}): HoldingView {
  const { collectedAt, dueAt, ruleText, soonWithinHours } = input
  const { remainingHours, state } = holdTime({
    collectedAt,
    preservation: 'as applied at receipt',
    rule: {
      hours: (dueAt.getTime() - collectedAt.getTime()) / HOUR,
      soonWithinHours: soonWithinHours ?? undefined,
    },
    at: input.at < collectedAt ? collectedAt : input.at,
  })
  return { dueAt: dueAt.toISOString(), remainingHours, state, rule: ruleText }
}
