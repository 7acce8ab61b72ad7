import { useQuery } from '@tanstack/react-query'
import { useMemo } from 'react'
import { clientNamesQuery, filtersQuery, methodNamesQuery } from '../api/history-queries'
import type { Names } from '../words/value-words'

/** Names for the references in entries; a name that is not there yet is shown by its number. */
export function useNames(): Names {
  const people = useQuery(filtersQuery)
  const clients = useQuery(clientNamesQuery)
  const methods = useQuery(methodNamesQuery)
  return useMemo(
    () => ({
      people: new Map((people.data?.people ?? []).map((each) => [each.id, each.name])),
      clients: new Map((clients.data?.items ?? []).map((each) => [each.id, each.name])),
      methods: new Map((methods.data?.items ?? []).map((each) => [each.id, each.title])),
    }),
    [people.data, clients.data, methods.data],
  )
}
