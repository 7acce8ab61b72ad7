import { SetMetadata } from '@nestjs/common'
import type { Trx } from '../database/executor.js'
import type { DomainEvent } from './event.js'

export const EVENT = 'weirlight:event'

type Handler<D> = (trx: Trx, payload: D) => Promise<void>

/** `@HandlesEvent(batchReleased) async raise(trx: Trx, { batchId }: { batchId: string }) {}` on a provider's method. */
export function HandlesEvent<D>(event: DomainEvent<D>) {
  const decorate = SetMetadata(EVENT, event)
  return <T extends Handler<D>>(
    target: object,
    key: string | symbol,
    descriptor: TypedPropertyDescriptor<T>,
  ): void => {
    decorate(target, key, descriptor)
  }
}
