import { Global, Module } from '@nestjs/common'
import { DiscoveryModule } from '@nestjs/core'
import { DomainEvents } from './domain-events.js'

@Global()
@Module({ imports: [DiscoveryModule], providers: [DomainEvents], exports: [DomainEvents] })
export class EventsModule {}
