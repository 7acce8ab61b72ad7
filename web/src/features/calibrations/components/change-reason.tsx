import { LIMITS } from '@weirlight/shared/limits'
import { useId, useLayoutEffect, useRef, useState, type CSSProperties, type KeyboardEvent } from 'react'

const USUAL = ['Typing slip', 'Read again', 'Wrong position'] as const

interface ChangeReasonProps {
  /** the cell it is about; the question stands beside it */
  anchor: Element | null
  /** e.g. `Position 5, A₁: 0.0307 becomes 0.0317` */
  title: string
  onReason: (reason: string) => void
  onCancel: () => void
}

const WIDTH = 300
const HEIGHT = 260

function placeBy(anchor: Element | null): CSSProperties {
  if (!anchor) return {}
  const rect = anchor.getBoundingClientRect()
  const left = Math.max(8, Math.min(rect.left - 40, window.innerWidth - WIDTH - 8))
  const isBelow = rect.bottom + HEIGHT < window.innerHeight
  const top = isBelow ? rect.bottom + 6 : Math.max(8, rect.top - HEIGHT - 6)
  return { margin: 0, left, top }
}

/**
 * Asked when a saved reading is changed: both readings are kept, and the reason with them. One key for the usual reasons.
 */
export function ChangeReason({ anchor, title, onReason, onCancel }: ChangeReasonProps) {
  const dialog = useRef<HTMLDialogElement>(null)
  const titleId = useId()
  const [choice, setChoice] = useState<string>(USUAL[0])
  const [other, setOther] = useState('')
  const isOther = choice === ''
  const reason = isOther ? other.trim() : choice
  const isTooShort = reason.length < LIMITS.reasonMinimum

  // closed before it leaves the page: the browser then gives the cell its focus back
  useLayoutEffect(() => {
    const element = dialog.current
    element?.showModal()
    return () => element?.close()
  }, [])

  const onKeyDown = (event: KeyboardEvent<HTMLDialogElement>) => {
    if (event.target instanceof HTMLInputElement && event.target.type === 'text') return
    const usual = USUAL[Number(event.key) - 1]
    if (!usual) return
    event.preventDefault()
    onReason(usual)
  }

  return (
    <dialog
      ref={dialog}
      className="change-reason"
      aria-labelledby={titleId}
      style={placeBy(anchor)}
      onCancel={(event) => {
        event.preventDefault()
        onCancel()
      }}
      onKeyDown={onKeyDown}
    >
      <form
        className="stack"
        onSubmit={(event) => {
          event.preventDefault()
          if (!isTooShort) onReason(reason)
        }}
      >
        <p id={titleId} className="strong">
          {title}
        </p>
        <fieldset className="bare-set">
          <legend className="note">Why? Both readings are kept.</legend>
          {USUAL.map((usual, index) => (
            <label key={usual}>
              <input
                type="radio"
                name="reason"
                autoFocus={index === 0}
                checked={choice === usual}
                onChange={() => setChoice(usual)}
              />
              <span>{usual}</span>
              <kbd className="kbd">{index + 1}</kbd>
            </label>
          ))}
          <label>
            <input type="radio" name="reason" checked={isOther} onChange={() => setChoice('')} />
            <span>Another reason</span>
          </label>
        </fieldset>
        {isOther && (
          <input
            type="text"
            className="field"
            aria-label="The reason in a few words"
            placeholder="In a few words"
            maxLength={LIMITS.reasonLength}
            value={other}
            autoFocus
            onChange={(event) => setOther(event.target.value)}
          />
        )}
        <div className="row">
          <button type="submit" className="button main" disabled={isTooShort}>
            Change it
          </button>
          <button type="button" className="button" onClick={onCancel}>
            Leave as it was
          </button>
        </div>
      </form>
    </dialog>
  )
}
