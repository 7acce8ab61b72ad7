import { useMediaQuery } from '../../../lib/use-media-query'

/** So narrow that label and readings alone have room. The same width stands in batches.css. */
export function useIsPhone(): boolean {
  return useMediaQuery('(max-width: 640px)')
}
