import type { ReactNode } from 'react'
import { useStory } from './story'

interface NumberWithStoryProps {
  /** null: there is nothing stored yet to tell of */
  resultId: string | null
  text: string
  unit?: string
  /** the same text, aligned for its column */
  children?: ReactNode
}

/** A reported number that opens its story. */
export function NumberWithStory({ resultId, text, unit, children }: NumberWithStoryProps) {
  const story = useStory()
  const shown = children ?? (unit ? `${text} ${unit}` : text)
  if (resultId === null || !story.isAvailable) return <>{shown}</>
  return (
    <button
      type="button"
      className="story"
      aria-label={`${text}${unit ? ` ${unit}` : ''}: what is behind this number`}
      onClick={(event) => {
        event.stopPropagation()
        story.open(resultId)
      }}
    >
      {shown}
    </button>
  )
}
