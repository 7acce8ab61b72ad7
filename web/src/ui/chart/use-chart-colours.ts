import { useMemo, useSyncExternalStore } from 'react'

const NAMES = [
  'ink',
  'quiet',
  'rule',
  'hair',
  'paper',
  'sheet',
  'weir',
  'copper',
  'meets',
  'caution',
  'above',
] as const
export type ChartColours = Record<(typeof NAMES)[number], string>

const query = window.matchMedia('(prefers-color-scheme: dark)')

function subscribe(listener: () => void): () => void {
  // the theme writes its variables in the same turn; read them after it
  const later = () => requestAnimationFrame(listener)
  query.addEventListener('change', later)
  return () => query.removeEventListener('change', later)
}

function readVariables(): string {
  const style = getComputedStyle(document.documentElement)
  return NAMES.map((name) => style.getPropertyValue(`--${name}`).trim()).join('|')
}

/** The colours of the theme in force, for chart definitions. */
export function useChartColours(): ChartColours {
  const joined = useSyncExternalStore(subscribe, readVariables)
  return useMemo(() => {
    const values = joined.split('|')
    return Object.fromEntries(NAMES.map((name, index) => [name, values[index] ?? ''])) as ChartColours
  }, [joined])
}
