import { AssayError, holdTime } from '@weirlight/shared/assay'
import type { MethodRecord } from '@weirlight/shared/contracts'
import type { ReceiveValues } from './receive-values'

const numberOf = (text: string | undefined): number | null => {
  const value = Number(text?.trim() ?? '')
  return text?.trim() && Number.isFinite(value) ? value : null
}

/**
 * Until when the bottle may be read, by the method's rule and what is entered so far: the same function that the
 * server decides with. Null until there is enough to go by.
 */
export function holdingOutlook(record: Pick<MethodRecord, 'holdTime'>, values: ReceiveValues): string | null {
  const { collectedAt, preservation, ph, temperatureC } = values
  if (!collectedAt?.includes('T') || !preservation) return null
  try {
    return holdTime({
      collectedAt,
      preservation: { kind: preservation, pH: numberOf(ph), temperatureC: numberOf(temperatureC) },
      rule: record.holdTime.rule,
      at: collectedAt,
    }).dueAt
  } catch (error) {
    if (error instanceof AssayError) return null
    throw error
  }
}

/** What the programme says of the method for a compliance sample; null where there is nothing to say. */
export function approvalOutlook(given: {
  record: Pick<MethodRecord, 'approvals' | 'analyte' | 'form'>
  programmeCode: string | undefined
  purpose: ReceiveValues['purpose']
}): { status: MethodRecord['approvals'][number]['status']; statement: string } | null {
  const { record, programmeCode, purpose } = given
  if (purpose !== 'compliance' || programmeCode === undefined) return null
  const found = record.approvals.find((each) => each.programme === programmeCode && each.form === record.form)
  if (!found)
    return { status: 'ask', statement: 'Nothing is recorded for this programme: ask the authority.' }
  return found.status === 'approved' ? null : { status: found.status, statement: found.statement }
}
