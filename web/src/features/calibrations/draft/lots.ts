import type { InstrumentRow, MaterialRow } from '../api/calibration-queries'

/** Why a lot cannot be chosen today, in a few words; null when it can. */
export function whyNotLot(lot: MaterialRow, today: string): string | null {
  if (lot.state === 'withdrawn') return 'withdrawn'
  if (lot.state === 'used-up') return 'used up'
  if (lot.expiresOn < today) return `expired ${lot.expiresOn}`
  if (!lot.usable) return 'not usable: see the lot'
  return null
}

export function whyNotInstrument(instrument: InstrumentRow, today: string): string | null {
  if (instrument.state === 'out-of-use') return 'out of use'
  if (instrument.nextCheckDueOn !== null && instrument.nextCheckDueOn < today)
    return `its check was due ${instrument.nextCheckDueOn}`
  if (instrument.nextCheckDueOn === null && !instrument.usable) return 'never checked'
  if (!instrument.usable) return 'not usable: see the instrument'
  return null
}

export interface Choice {
  value: string
  label: string
  /** said instead of letting it be chosen */
  why: string | null
}

function lotLabel(lot: MaterialRow): string {
  const strength = lot.concentration
    ? `, ${lot.concentration}${lot.uncertainty ? ` ± ${lot.uncertainty}` : ''} mg/L`
    : ''
  return `${lot.number} · ${lot.name}${strength}, to ${lot.expiresOn}`
}

/** Lots to choose from, the usable ones first, the kinds in the order asked for, what runs out first at their head. */
export function lotChoices(given: {
  lots: readonly MaterialRow[]
  kinds: readonly MaterialRow['kind'][]
  analyte: MaterialRow['analyte']
  today: string
}): Choice[] {
  const { lots, kinds, analyte, today } = given
  return lots
    .filter((lot) => kinds.includes(lot.kind) && (lot.analyte === null || lot.analyte === analyte))
    .map((lot) => ({ lot, why: whyNotLot(lot, today) }))
    .toSorted(
      (a, b) =>
        Number(a.why !== null) - Number(b.why !== null) ||
        kinds.indexOf(a.lot.kind) - kinds.indexOf(b.lot.kind) ||
        a.lot.expiresOn.localeCompare(b.lot.expiresOn),
    )
    .map(({ lot, why }) => ({ value: lot.id, label: lotLabel(lot), why }))
}

export function instrumentChoices(instruments: readonly InstrumentRow[], today: string): Choice[] {
  return instruments
    .map((instrument) => ({
      value: instrument.id,
      label: `${instrument.number} · ${instrument.name}, ${instrument.location}`,
      why: whyNotInstrument(instrument, today),
    }))
    .toSorted((a, b) => Number(a.why !== null) - Number(b.why !== null))
}
