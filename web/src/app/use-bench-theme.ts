import { useLayoutEffect, useSyncExternalStore } from 'react'
import { applyTokens, DARK, LIGHT, type Tokens } from './theme'

const query = window.matchMedia('(prefers-color-scheme: dark)')

function subscribe(listener: () => void): () => void {
  query.addEventListener('change', listener)
  return () => query.removeEventListener('change', listener)
}

/** The tokens of the theme that the system asks for, also set as CSS variables. */
export function useBenchTheme(): Tokens {
  const isDark = useSyncExternalStore(subscribe, () => query.matches)
  const tokens = isDark ? DARK : LIGHT
  useLayoutEffect(() => applyTokens(tokens), [tokens])
  return tokens
}
