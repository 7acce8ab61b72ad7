import type { StoryView } from './api/result-queries'

/** `story-S-26-04122-fe-total.json` */
export function storyFileName({ result }: StoryView): string {
  return `story-${result.sampleNumber}-${result.analyte}-${result.form}.json`.toLowerCase()
}

/** Hands the story to the person as a file: the answer of the server, whole, and who took it when. */
export function saveStory(story: StoryView, taken: { by: string; at: string }): void {
  const text = JSON.stringify({ takenBy: taken.by, takenAt: taken.at, story }, null, 2)
  const href = URL.createObjectURL(new Blob([text], { type: 'application/json' }))
  const link = document.createElement('a')
  link.href = href
  link.download = storyFileName(story)
  link.click()
  // the browser has taken hold of it by then
  setTimeout(() => URL.revokeObjectURL(href), 10_000)
}
