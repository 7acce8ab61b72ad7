import type { ReactNode } from 'react'
import type { SavedState } from './run-grid-types'

const MARKS: Record<SavedState, { word: string; tone: string; shape: ReactNode }> = {
  saved: {
    word: 'saved',
    tone: 'is-meets',
    shape: <path d="M1 4.5 3 6.5 7 1.5" fill="none" stroke="currentColor" strokeWidth="1.5" />,
  },
  waiting: {
    word: 'not saved yet',
    tone: 'is-caution',
    shape: <circle cx="4" cy="4" r="3" fill="none" stroke="currentColor" strokeWidth="1.5" />,
  },
  saving: {
    word: 'being saved',
    tone: 'is-quiet',
    shape: <path d="M1 4h6" stroke="currentColor" strokeWidth="2" />,
  },
  failed: {
    word: 'not saved',
    tone: 'is-above',
    shape: <path d="M4 .5 8 7.5H0Z" fill="currentColor" />,
  },
}

/** Whether one cell has reached the server; no mark where there is nothing to say. */
export function CellMark({ state }: { state: SavedState | undefined }) {
  if (!state) return <span className="cell-mark" />
  const { word, tone, shape } = MARKS[state]
  return (
    <svg className={`cell-mark ${tone}`} viewBox="0 0 8 8" role="img" aria-label={word}>
      <title>{word}</title>
      {shape}
    </svg>
  )
}
