import type { BodyInput, receiveSample } from '@weirlight/shared/contracts'

export type ReceiveBody = BodyInput<typeof receiveSample>
/** the form as it stands: anything may still be missing */
export type ReceiveValues = { [Field in keyof ReceiveBody]?: ReceiveBody[Field] | undefined }

/**
 * What the form sends. What must be there and is missing stays missing, so that the contract asks for it on its field;
 * what may be missing is sent empty.
 */
export function bodyOf(values: ReceiveValues): ReceiveBody {
  const required = (text: string | undefined) => (text?.trim() ? text.trim() : undefined) as string
  return {
    draftId: required(values.draftId),
    clientId: required(values.clientId),
    pointId: required(values.pointId),
    purpose: values.purpose as ReceiveBody['purpose'],
    kind: values.kind as ReceiveBody['kind'],
    collectedAt: required(values.collectedAt),
    collectedBy: values.collectedBy ?? '',
    receivedAt: required(values.receivedAt),
    preservation: values.preservation as ReceiveBody['preservation'],
    ph: values.ph?.trim() ?? '',
    temperatureC: values.temperatureC?.trim() ?? '',
    container: values.container as ReceiveBody['container'],
    filteredInField: values.filteredInField ?? false,
    condition: values.condition ?? '',
    remarks: values.remarks ?? '',
    determinations: values.determinations ?? [],
  }
}

/** An empty form; what is nearly always so is set already. */
export const emptyForm = (draftId: string): ReceiveValues => ({
  draftId,
  kind: 'routine',
  filteredInField: false,
  determinations: [],
})

/** The next bottle of the same round: what belongs to the round stays, what belongs to the bottle is asked again. */
export function nextOfRound(sent: ReceiveValues, draftId: string): ReceiveValues {
  const { clientId, purpose, kind, collectedBy, receivedAt, preservation, container, determinations } = sent
  return {
    ...emptyForm(draftId),
    clientId,
    purpose,
    kind,
    collectedBy,
    receivedAt,
    preservation,
    container,
    filteredInField: sent.filteredInField ?? false,
    determinations: determinations ?? [],
  }
}
