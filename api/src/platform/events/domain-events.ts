import { Injectable, type OnApplicationBootstrap } from '@nestjs/common'
import { DiscoveryService, MetadataScanner, Reflector } from '@nestjs/core'
import type { Trx } from '../database/executor.js'
import type { DomainEvent } from './event.js'
import { EVENT } from './handles-event.decorator.js'

type Handler = (trx: Trx, payload: unknown) => Promise<void>
type Methods = Record<string, Handler>

/** How a feature tells those above it, without knowing them. A handler that fails undoes the whole change. */
@Injectable()
export class DomainEvents implements OnApplicationBootstrap {
  private readonly handlers = new Map<string, Handler[]>()

  constructor(
    private readonly discovery: DiscoveryService,
    private readonly scanner: MetadataScanner,
    private readonly reflector: Reflector,
  ) {}

  onApplicationBootstrap(): void {
    for (const wrapper of this.discovery.getProviders()) {
      const instance: unknown = wrapper.isDependencyTreeStatic() ? wrapper.instance : undefined
      if (typeof instance !== 'object' || instance === null) continue
      const methods = instance as Methods
      for (const name of this.scanner.getAllMethodNames(Object.getPrototypeOf(instance) as object | null)) {
        const method = methods[name]
        if (!method) continue
        const event = this.reflector.get<DomainEvent | undefined>(EVENT, method)
        if (event)
          this.handlers.set(event.name, [...(this.handlers.get(event.name) ?? []), method.bind(instance)])
      }
    }
  }

  /** One handler after another, inside the caller's transaction. */
  async publish<D>(trx: Trx, event: DomainEvent<D>, payload: D): Promise<void> {
    for (const handle of this.handlers.get(event.name) ?? []) await handle(trx, payload)
  }
}
