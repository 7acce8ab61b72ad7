/** Something a lower feature says and higher ones act on, in the same transaction. */
export interface DomainEvent<D = unknown> {
  readonly name: string
  /** carries the payload's type; never set */
  readonly payload?: D
}

/** `export const batchReleased = defineEvent<{ batchId: string }>('batch.released')` beside the feature that says it. */
export function defineEvent<D>(name: string): DomainEvent<D> {
  return { name }
}
