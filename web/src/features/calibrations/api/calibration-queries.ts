import {
  getCalibration,
  getMethod,
  listCalibrations,
  listInstruments,
  listMaterials,
  listMethods,
  type MethodDefinition,
  type ResponseOf,
} from '@weirlight/shared/contracts'
import { pagesFor, queryFor } from '../../../lib'

export type CalibrationRow = ResponseOf<typeof listCalibrations>['items'][number]
export type CalibrationState = CalibrationRow['state']
export type MaterialRow = ResponseOf<typeof listMaterials>['items'][number]
export type InstrumentRow = ResponseOf<typeof listInstruments>['items'][number]
export type MethodView = ResponseOf<typeof getMethod>

/** more calibrations are never in force, in drafts or waiting at once */
const ALL = 200

export const calibrationsInState = (state: CalibrationState, methodId?: string) =>
  queryFor(listCalibrations, { query: { state, limit: ALL, ...(methodId ? { methodId } : {}) } })
export const calibrationPages = (filters: { state: string; methodId: string }) =>
  pagesFor(listCalibrations, {
    query: { state: filters.state as CalibrationState, methodId: filters.methodId },
  })
export const calibrationQuery = (id: string) => queryFor(getCalibration, { params: { id } })
export const methodsQuery = queryFor(listMethods)
export const methodQuery = (id: string) => queryFor(getMethod, { params: { id } })
export const instrumentsQuery = queryFor(listInstruments)
export const materialsQuery = queryFor(listMaterials, { query: {} })

/** The catalogue entry of a method; the server keeps it whole and as the catalogue wrote it. */
export const definitionOf = (method: MethodView) => method.definition as unknown as MethodDefinition
