import { lazy, Suspense, type ReactNode } from 'react'
import type { StorySlotProps } from '../ui/story'

const StoryDrawer = lazy(async () => ({ default: (await import('../features/results')).StoryDrawer }))

/** What a number opens; loaded with the first number that is opened. Null would leave numbers plain text. */
export const storySlot: ((props: StorySlotProps) => ReactNode) | null = (props) => (
  <Suspense fallback={null}>
    <StoryDrawer key={props.resultId} {...props} />
  </Suspense>
)
