import { Injectable } from '@nestjs/common'

/**
 * The only clock. Pinned, it tells the database wrapper to ask for that time as well; the database obeys
 * the owner's role alone, so a pinned clock moves nothing in a running laboratory.
 */
@Injectable()
export class Clock {
  private pinned: Date | undefined

  now(): Date {
    return this.pinned ? new Date(this.pinned) : new Date()
  }

  get pinnedAt(): Date | undefined {
    return this.pinned
  }

  pin(at: Date | string): void {
    this.pinned = new Date(at)
  }

  unpin(): void {
    this.pinned = undefined
  }
}
