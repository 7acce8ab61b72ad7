import { getControlChart, listMethods, type controlKind, type ResponseOf } from '@weirlight/shared/contracts'
import type { z } from 'zod'
import { queryFor } from '../../../lib'

export type ControlKind = z.infer<typeof controlKind>
export type ControlChartView = ResponseOf<typeof getControlChart>

export const controlChartQuery = (methodId: string, kind: ControlKind) =>
  queryFor(getControlChart, { query: { methodId, kind } })
export const methodsQuery = queryFor(listMethods)
