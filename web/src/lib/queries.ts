import type { Endpoint, ResponseOf } from '@weirlight/shared/contracts'
import {
  infiniteQueryOptions,
  queryOptions,
  useMutation,
  useQueryClient,
  type QueryClient,
  type UseMutationResult,
} from '@tanstack/react-query'
import { call, type CallArguments, type CallInput } from './call'
import type { ProblemError } from './problem-error'

/** The first part of every key of an endpoint: what a mutation invalidates. */
export function keyOf(endpoint: Endpoint): readonly [string] {
  return [endpoint.name]
}

/** Query options for a GET endpoint. Keys come from here and nowhere else. */
export function queryFor<E extends Endpoint>(endpoint: E, ...[input]: CallArguments<E>) {
  const given = (input ?? {}) as CallInput<E>
  return queryOptions<ResponseOf<E>, ProblemError>({
    queryKey: [endpoint.name, given],
    queryFn: ({ signal }) => call(endpoint, given, { signal }),
  })
}

interface Page {
  items: readonly unknown[]
  next: string | null
}

/** Options for a list paged by key, for `useInfiniteQuery` and `DataTable`. */
export function pagesFor<E extends Endpoint>(endpoint: E, ...[input]: CallArguments<E>) {
  const given = (input ?? {}) as CallInput<E> & { query?: Record<string, unknown> }
  return infiniteQueryOptions({
    queryKey: [endpoint.name, 'pages', given],
    initialPageParam: null as string | null,
    queryFn: ({ signal, pageParam }): Promise<ResponseOf<E>> => {
      const query = pageParam === null ? given.query : { ...given.query, after: pageParam }
      return call(endpoint, { ...given, query } as CallInput<E>, { signal })
    },
    getNextPageParam: (last: unknown) => (last as Page).next,
  })
}

export async function invalidate(client: QueryClient, endpoints: readonly Endpoint[]): Promise<void> {
  await Promise.all(endpoints.map((endpoint) => client.invalidateQueries({ queryKey: keyOf(endpoint) })))
}

interface CallMutationOptions<E extends Endpoint> {
  /** GET endpoints whose answers this act makes old */
  invalidates?: readonly Endpoint[]
  /** called once the answer is there and the old queries are marked */
  onDone?: (answer: ResponseOf<E>, input: CallInput<E>) => void | Promise<void>
  onProgress?: (share: number) => void
}

/** A changing call as a mutation: `const sign = useCall(signCalibration, { invalidates: [getCalibration] })`. */
export function useCall<E extends Endpoint>(
  endpoint: E,
  options: CallMutationOptions<E> = {},
): UseMutationResult<ResponseOf<E>, ProblemError, CallInput<E>> {
  const client = useQueryClient()
  return useMutation<ResponseOf<E>, ProblemError, CallInput<E>>({
    mutationKey: [endpoint.name],
    mutationFn: (input) =>
      call(endpoint, input, options.onProgress ? { onProgress: options.onProgress } : {}),
    onSuccess: async (answer, input) => {
      // not awaited: the form is done when the server says so, not when every list has been read again
      void invalidate(client, options.invalidates ?? [])
      await options.onDone?.(answer, input)
    },
  })
}
