import { useQuery } from '@tanstack/react-query'
import { definitionOf, instrumentsQuery, materialsQuery, methodQuery } from '../api/calibration-queries'

/** The method of a calibration with what its page needs of it. */
export function useMethod(methodId: string) {
  return useQuery({
    ...methodQuery(methodId),
    select: (method) => ({
      definition: definitionOf(method),
      molarMass: method.molarMass,
      title: method.title,
    }),
    enabled: methodId !== '',
  })
}
export type Method = NonNullable<ReturnType<typeof useMethod>['data']>

/** Instruments and lots to choose from; empty until they are there. */
export function useBenchStock() {
  const instruments = useQuery(instrumentsQuery)
  const materials = useQuery(materialsQuery)
  return {
    instruments: instruments.data?.items ?? [],
    materials: materials.data?.items ?? [],
    problem: instruments.error ?? materials.error,
  }
}
