import { useMediaQuery } from './use-media-query'

/** A tablet or a phone: the margin folds. The same width stands in frame.css. */
export function useIsNarrow(): boolean {
  return useMediaQuery('(max-width: 1100px)')
}
