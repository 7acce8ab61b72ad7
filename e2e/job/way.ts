import { getMethod, getSession, listMethods } from '@weirlight/shared/contracts'
import { accountByEmail, accountOf, type Account } from '../support/accounts.js'
import type { Api } from '../support/api.js'
import { expectedSlope } from '../support/numbers.js'
import type { Metal } from './metals.js'

/** Who takes part, and how the method measures. */
export interface Start {
  metal: Metal
  technician: Account
  manager: Account
  client: Account
  bench: Api
  timeZone: string
  slope: number
  molarMass: number
}

/** Numbers of the two samples, below and above the limit. */
export interface Bottles {
  low: string
  high: string
}

/** What the later steps of one metal share. */
export type Way = Start & Bottles

export async function setOut(metal: Metal, apiOf: (account: Account) => Promise<Api>): Promise<Start> {
  const technician = accountOf('technician', metal.technician)
  const bench = await apiOf(technician)
  const { session } = await bench.call(getSession, {})
  const { slope, molarMass } = await methodOf(bench, metal)
  return {
    metal,
    technician,
    manager: accountOf('qa-manager', metal.technician % 2),
    client: accountByEmail(metal.client.person),
    bench,
    timeZone: session?.timeZone ?? '',
    slope,
    molarMass,
  }
}

async function methodOf(api: Api, metal: Metal) {
  const { items } = await api.call(listMethods, {})
  const row = items.find((each) => each.code === metal.methodCode)
  if (!row) throw new Error(`There is no method ${metal.methodCode}.`)
  const method = await api.call(getMethod, { params: { id: row.id } })
  const { value: molarAbsorptivity } = method.definition['molarAbsorptivity'] as { value: number }
  // as a real reagent gives it: a little under the published value, constructed
  const slope =
    0.985 *
    expectedSlope({
      molarAbsorptivity,
      molarMass: method.molarMass,
      cellPathCm: Number(metal.cellPathCm),
    })
  return { ...method, slope }
}
