import type { ReactNode } from 'react'

/** A number of ours, S-26-04117: it may be broken at its hyphens nowhere. */
const NUMBERS = /(\b[A-Z]-\d\d-\d+\b)/

/** A sentence whose sample, batch and lot numbers stay in one piece. */
export function unbroken(text: string): ReactNode {
  const parts = text.split(NUMBERS)
  if (parts.length === 1) return text
  return parts.map((part, index) =>
    index % 2 === 0 ? (
      part
    ) : (
      <span key={index} className="nowrap">
        {part}
      </span>
    ),
  )
}
