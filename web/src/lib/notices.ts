/** One short sentence said quietly at the foot of the page and to screen readers; the newest replaces the last. */
export interface Notice {
  id: number
  text: string
  tone: 'done' | 'failed'
}

let current: Notice | null = null
let count = 0
let timer: ReturnType<typeof setTimeout> | undefined
const listeners = new Set<() => void>()
const SHOWN_FOR = 8000

function show(notice: Notice | null) {
  current = notice
  clearTimeout(timer)
  if (notice) timer = setTimeout(() => show(null), SHOWN_FOR)
  listeners.forEach((listener) => listener())
}

export const notices = {
  subscribe: (listener: () => void): (() => void) => {
    listeners.add(listener)
    return () => void listeners.delete(listener)
  },
  current: (): Notice | null => current,
  dismiss: (): void => show(null),
}

const say = (tone: Notice['tone']) => (text: string) => {
  count += 1
  show({ id: count, text, tone })
}
const notice = { done: say('done'), failed: say('failed') }

/** `useNotice().done('Sample S-26-04117 received.')` */
export function useNotice() {
  return notice
}
