import { useQuery } from '@tanstack/react-query'
import { showUnit } from '@weirlight/shared/contracts'
import { useMemo } from 'react'
import { clientNamesQuery, filtersQuery, limitNamesQuery, methodNamesQuery } from '../api/history-queries'
import type { Names } from '../words/value-words'

/** Names for the references in entries; a name that is not there yet is shown by its number. */
export function useNames(): Names {
  const people = useQuery(filtersQuery)
  const clients = useQuery(clientNamesQuery)
  const methods = useQuery(methodNamesQuery)
  const programmes = useQuery(limitNamesQuery)
  return useMemo(
    () => ({
      people: new Map((people.data?.people ?? []).map((each) => [each.id, each.name])),
      clients: new Map((clients.data?.items ?? []).map((each) => [each.id, each.name])),
      methods: new Map((methods.data?.items ?? []).map((each) => [each.id, each.title])),
      limits: new Map(
        (programmes.data?.items ?? []).flatMap(({ limits }) =>
          limits.map((each) => [each.id, `${each.name}, ${each.value} ${showUnit(each.unit)}`]),
        ),
      ),
    }),
    [people.data, clients.data, methods.data, programmes.data],
  )
}
