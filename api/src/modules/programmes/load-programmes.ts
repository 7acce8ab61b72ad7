import type { ClockDefinition, LimitDefinition, ProgrammeDefinition } from '@weirlight/shared/contracts'
import type { Trx } from '../../platform/index.js'
import { ReferenceRepository } from './reference.repository.js'

/** Brings programmes, their limits and the clocks to what the catalogue says. @returns how many rows changed */
export async function loadProgrammes(
  trx: Trx,
  {
    programmes,
    limits,
    clocks,
  }: {
    programmes: readonly ProgrammeDefinition[]
    limits: readonly LimitDefinition[]
    clocks: readonly ClockDefinition[]
  },
): Promise<number> {
  const reference = new ReferenceRepository()
  const byCode = new Map(limits.map((limit) => [limit.code, limit]))
  let changed = 0
  for (const programme of programmes) {
    const { id, isChanged } = await reference.putProgramme(trx, programme)
    if (isChanged) changed += 1
    for (const code of programme.limits) {
      const limit = byCode.get(code)
      if (!limit)
        throw new Error(
          `The programme ${programme.code} names the limit ${code}, which is not in the catalogue.`,
        )
      if (await reference.putLimit(trx, id, limit)) changed += 1
    }
  }
  for (const clock of clocks) if (await reference.putClock(trx, clock)) changed += 1
  return changed
}
