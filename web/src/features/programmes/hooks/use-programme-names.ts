import { useQuery } from '@tanstack/react-query'
import { useMemo } from 'react'
import { programmesQuery } from '../api/programme-queries'

/** A programme's code to its name, for pages that name programmes in passing. */
export function useProgrammeNames(): ReadonlyMap<string, string> {
  const { data } = useQuery(programmesQuery)
  return useMemo(() => new Map((data?.items ?? []).map((each) => [each.code, each.name])), [data])
}
