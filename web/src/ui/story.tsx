import { createContext, useCallback, useContext, useMemo, type ReactNode } from 'react'
import { useSearchParams } from 'react-router-dom'

interface Story {
  isAvailable: boolean
  open: (resultId: string) => void
  close: () => void
}

const StoryContext = createContext<Story>({
  isAvailable: false,
  open: () => undefined,
  close: () => undefined,
})

export function useStory(): Story {
  return useContext(StoryContext)
}

export interface StorySlotProps {
  resultId: string
  close: () => void
}

const PARAMETER = 'story'

interface StoryProviderProps {
  /** draws the drawer; left out where the person may not see stories */
  slot: ((props: StorySlotProps) => ReactNode) | null
  children: ReactNode
}

/** Keeps the open story in the address: a link to it can be sent, and Back closes it. */
export function StoryProvider({ slot, children }: StoryProviderProps) {
  const [search, setSearch] = useSearchParams()
  const resultId = search.get(PARAMETER)
  const open = useCallback(
    (id: string) =>
      setSearch((current) => {
        const next = new URLSearchParams(current)
        next.set(PARAMETER, id)
        return next
      }),
    [setSearch],
  )
  const close = useCallback(
    () =>
      setSearch(
        (current) => {
          const next = new URLSearchParams(current)
          next.delete(PARAMETER)
          return next
        },
        { replace: true },
      ),
    [setSearch],
  )
  const story = useMemo(() => ({ isAvailable: slot !== null, open, close }), [slot, open, close])
  return (
    <StoryContext value={story}>
      {children}
      {slot && resultId && slot({ resultId, close })}
    </StoryContext>
  )
}
