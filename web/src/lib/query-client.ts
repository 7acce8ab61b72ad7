import { QueryClient } from '@tanstack/react-query'
import { ProblemError } from './problem-error'

const RETRIES = 2

function isWorthAnotherTry(failures: number, error: Error): boolean {
  if (!(error instanceof ProblemError)) return false
  return failures < RETRIES && (error.code === 'offline' || error.code === 'unavailable')
}

/** Reads are tried again when the server could not be reached; changes never are, by themselves. */
export function makeQueryClient(): QueryClient {
  return new QueryClient({
    defaultOptions: {
      queries: {
        staleTime: 15_000,
        gcTime: 10 * 60_000,
        retry: isWorthAnotherTry,
        retryDelay: (attempt) => 800 * 2 ** attempt,
        // the browser's own idea of being offline is often wrong on a laboratory network
        networkMode: 'always',
      },
      mutations: { retry: false, networkMode: 'always' },
    },
  })
}
