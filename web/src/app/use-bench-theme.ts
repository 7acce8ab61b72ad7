import { useLayoutEffect } from 'react'
import { useMediaQuery } from '../lib/use-media-query'
import { applyTokens, DARK, LIGHT, type Tokens } from './theme'

/** The tokens of the theme that the system asks for, also set as CSS variables. */
export function useBenchTheme(): Tokens {
  const isDark = useMediaQuery('(prefers-color-scheme: dark)')
  const tokens = isDark ? DARK : LIGHT
  useLayoutEffect(() => applyTokens(tokens), [tokens])
  return tokens
}
