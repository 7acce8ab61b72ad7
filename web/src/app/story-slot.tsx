import type { ReactNode } from 'react'
import type { StorySlotProps } from '../ui/story'

/** What a number opens. While it is null, numbers are plain text. */
export const storySlot: ((props: StorySlotProps) => ReactNode) | null = null
