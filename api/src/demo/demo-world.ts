import type { INestApplicationContext, Type } from '@nestjs/common'
import type { MethodDefinition } from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { Clock, readTime } from '../platform/index.js'
import type { Chance } from './chance.js'
import type { DemoData } from './demo-data.js'

export interface DemoMethod {
  id: string
  analyte: 'Fe' | 'Cu' | 'Mn' | 'Cr'
  title: string
  definition: MethodDefinition & { molarMass: number }
  cellPathCm: string
  /** mg/L */
  standards: readonly string[]
  instrumentId: string
  stockId: string
  workingId: string
  secondSourceId: string
  controlId: string
  reagentIds: string[]
  /** of the solution in the cell, A per mg/L; what the simulated reagent gives */
  slope: number
}

export interface DemoPoint {
  id: string
  clientId: string
  code: string
  typical: Partial<Record<DemoMethod['analyte'], number>>
}

/** The simulated laboratory while its past is made: services, people, and the clock that is moved along. */
export class DemoWorld {
  readonly passphrases = new Map<string, string>()
  readonly people = new Map<string, Actor>()
  methods: DemoMethod[] = []
  points: DemoPoint[] = []
  /** true concentrations, mg/L, by determination */
  readonly truth = new Map<string, number>()

  constructor(
    private readonly app: INestApplicationContext,
    readonly data: DemoData,
    readonly chance: Chance,
    /** the server's time when the load began; nothing is made after it */
    readonly end: Date,
  ) {}

  service<T>(type: Type<T>): T {
    return this.app.get(type)
  }

  person(email: string): Actor {
    const found = this.people.get(email)
    if (!found) throw new Error(`${email} is not there yet.`)
    return found
  }

  ofRole(role: Actor['role']): Actor[] {
    return [...this.people.values()].filter((one) => one.role === role)
  }

  first(role: Actor['role']): Actor {
    const [found] = this.ofRole(role)
    if (!found) throw new Error(`The demonstration has no ${role} yet.`)
    return found
  }

  passphraseOf(actor: Actor): string {
    const email = [...this.people].find(([, one]) => one.userId === actor.userId)?.[0] ?? ''
    return this.passphrases.get(email) ?? ''
  }

  method(analyte: DemoMethod['analyte']): DemoMethod {
    const found = this.methods.find((one) => one.analyte === analyte)
    if (!found) throw new Error(`No method for ${analyte}.`)
    return found
  }

  /** `2026-08-03`, `09:20` in the laboratory's zone */
  time(day: string, wall: string): Date {
    const read = readTime(`${day} ${wall}`, this.data.laboratory.timeZone)
    if ('problem' in read) throw new Error(`${day} ${wall}: ${read.problem}`)
    return read.at
  }

  /** Moves the laboratory's clock. */
  at(time: Date): void {
    this.service(Clock).pin(time)
  }

  /** Whether a time lies in the past of the real clock. */
  isPast(time: Date): boolean {
    return time < this.end
  }

  minutesLater(time: Date, minutes: number): Date {
    return new Date(time.getTime() + minutes * 60_000)
  }

  /** The reading of a solution as an instrument would give it. */
  absorbance(method: DemoMethod, concentration: number, drift = 1): string {
    const exact = 0.0015 + method.slope * concentration * drift
    const noise = this.chance.normal(0.0005 + 0.0012 * exact)
    return (exact + noise).toFixed(4)
  }
}
