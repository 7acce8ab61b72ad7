import { useCallback, useRef } from 'react'

const CANDIDATES = 'input, select, textarea, button[type="submit"]'

function isReachable(element: HTMLElement): boolean {
  if (element.matches(':disabled, [type="hidden"], [tabindex="-1"]')) return false
  return element.getClientRects().length > 0
}

/** Of a group of radio buttons only one is a stop, as with Tab. */
function isStop(element: HTMLElement, all: readonly HTMLElement[]): boolean {
  if (!(element instanceof HTMLInputElement) || element.type !== 'radio') return true
  const group = all.filter(
    (each) => each instanceof HTMLInputElement && each.type === 'radio' && each.name === element.name,
  ) as HTMLInputElement[]
  const stop = group.find((each) => each.checked) ?? group[0]
  return stop === element
}

/** The next field after one, in the order of the form. */
export function nextField(form: HTMLElement, from: Element): HTMLElement | null {
  const reachable = [...form.querySelectorAll<HTMLElement>(CANDIDATES)].filter(isReachable)
  const stops = reachable.filter((element) => isStop(element, reachable) || element === from)
  const name = from instanceof HTMLInputElement && from.type === 'radio' ? from.name : null
  const after = stops.slice(stops.indexOf(from as HTMLElement) + 1)
  return after.find((each) => name === null || (each as HTMLInputElement).name !== name) ?? null
}

/**
 * A scanner ends what it reads with Enter, and so do people with one hand free: Enter goes to the next field and never
 * sends a half-filled form. Ctrl with Enter sends it from anywhere.
 */
export function useEnterMoves(send: () => void) {
  const frame = useRef<HTMLDivElement>(null)
  const moveOn = useCallback(() => {
    // after the control has taken what was chosen
    setTimeout(() => {
      const from = document.activeElement
      if (frame.current && from && frame.current.contains(from)) nextField(frame.current, from)?.focus()
    })
  }, [])
  const onKeyDown = useCallback(
    (event: React.KeyboardEvent) => {
      if (event.key !== 'Enter' || event.nativeEvent.isComposing) return
      if (event.ctrlKey || event.metaKey) {
        event.preventDefault()
        send()
        return
      }
      const target = event.target as HTMLElement
      if (target.matches('textarea, button, a, [role="combobox"]')) return
      event.preventDefault()
      moveOn()
    },
    [moveOn, send],
  )
  return { frame, onKeyDown, moveOn }
}
