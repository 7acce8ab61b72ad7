import type { AnalyteDefinition, HoldTimeRuleDefinition, MethodDefinition } from '@weirlight/shared/contracts'
import type { Trx } from '../../platform/index.js'
import { MethodsRepository } from './methods.repository.js'

/** Brings the methods to what the catalogue says, each with what it refers to. @returns how many rows changed */
export async function loadMethods(
  trx: Trx,
  {
    methods,
    analytes,
    holdTimeRules,
  }: {
    methods: readonly MethodDefinition[]
    analytes: readonly AnalyteDefinition[]
    holdTimeRules: readonly HoldTimeRuleDefinition[]
  },
): Promise<number> {
  const repository = new MethodsRepository()
  let changed = 0
  for (const method of methods) {
    const analyte = analytes.find(({ code }) => code === method.analyte)
    const holdTime = holdTimeRules.find(({ code }) => code === method.holdTimeRule)
    if (!analyte)
      throw new Error(`The method ${method.code} measures ${method.analyte}, which is not in the catalogue.`)
    if (!holdTime)
      throw new Error(
        `The method ${method.code} names the holding time ${method.holdTimeRule}, which is not there.`,
      )
    if (await repository.put(trx, { ...method, molarMass: analyte.molarMass, holdTime })) changed += 1
  }
  return changed
}
