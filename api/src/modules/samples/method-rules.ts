import type { MethodDefinition } from '@weirlight/shared/contracts'
import type { holdTimeRuleDefinition } from '@weirlight/shared/reference'
import type { z } from 'zod'

export type HoldRule = Pick<z.infer<typeof holdTimeRuleDefinition>, 'code' | 'text' | 'container' | 'rule'>

/** What receiving needs to know of a method. */
export interface MethodRules {
  id: string
  title: string
  analyte: MethodDefinition['analyte']
  form: MethodDefinition['form']
  active: boolean
  container: string
  approvals: MethodDefinition['approvals']
  holdTime: HoldRule
}
