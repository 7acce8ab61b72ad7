import type { ReactNode } from 'react'

export type Shape = 'ring' | 'disc' | 'diamond' | 'triangle'
export type Tone = 'weir' | 'meets' | 'caution' | 'above' | 'quiet'

/** As `STATE_MARKS` of `@weirlight/shared/states` gives it. */
export interface Mark {
  word: string
  shape: Shape
  tone: Tone
}

const SHAPES: Record<Shape, ReactNode> = {
  ring: <circle cx="5.5" cy="5.5" r="4" fill="none" stroke="currentColor" strokeWidth="2" />,
  disc: <circle cx="5.5" cy="5.5" r="5" fill="currentColor" />,
  diamond: <path d="M5.5 0 11 5.5 5.5 11 0 5.5Z" fill="currentColor" />,
  triangle: <path d="M5.5 .5 11 10.5H0Z" fill="currentColor" />,
}

export function MarkShape({ shape }: { shape: Shape }) {
  return (
    <svg viewBox="0 0 11 11" width="11" height="11" aria-hidden="true">
      {SHAPES[shape]}
    </svg>
  )
}

/** A state: always a word and a shape. Children take the place of the word where a number says it better. */
export function StatusTag({ mark, children }: { mark: Mark; children?: ReactNode }) {
  const words = children ?? mark.word
  // a line break inside two short words helps nobody
  const isShort = typeof words === 'string' && words.length <= 12
  return (
    <span className={`state is-${mark.tone}`}>
      <MarkShape shape={mark.shape} />
      <span className={isShort ? 'nowrap' : undefined}>{words}</span>
    </span>
  )
}
