import { useCallback, useEffect, useRef, useState, type ReactNode } from 'react'
import { parseDay } from '../lib/time'

/** The row of filters over a list. */
export function FilterBar({ children, onClear }: { children: ReactNode; onClear?: () => void }) {
  return (
    <search className="filters no-print">
      {children}
      {onClear && (
        <button type="button" className="button plain" onClick={onClear}>
          Clear
        </button>
      )}
    </search>
  )
}

interface ControlProps {
  label: string
  value: string
  onChange: (value: string) => void
}

export function FilterSelect(
  props: ControlProps & { options: readonly { value: string; label: string }[]; allLabel?: string },
) {
  return (
    <label>
      {props.label}
      <select className="field" value={props.value} onChange={(event) => props.onChange(event.target.value)}>
        <option value="">{props.allLabel ?? 'All'}</option>
        {props.options.map((option) => (
          <option key={option.value} value={option.value}>
            {option.label}
          </option>
        ))}
      </select>
    </label>
  )
}

const PAUSE = 300

/** Text filters by itself shortly after the last key, or at once with Enter or on leaving. */
export function FilterText({
  label,
  value,
  onChange,
  placeholder,
  width = 150,
}: ControlProps & { placeholder?: string; width?: number }) {
  const [text, setText] = useState(value)
  const [seen, setSeen] = useState(value)
  if (seen !== value) {
    // the filter was changed from elsewhere: cleared, or by the address
    setSeen(value)
    setText(value)
  }
  const sent = useRef(value)
  useEffect(() => {
    sent.current = value
  }, [value])
  const send = useCallback(() => {
    const wanted = text.trim()
    if (sent.current === wanted) return
    sent.current = wanted
    onChange(wanted)
  }, [text, onChange])
  useEffect(() => {
    if (text === value) return
    const timer = setTimeout(send, PAUSE)
    return () => clearTimeout(timer)
  }, [text, value, send])
  return (
    <label>
      {label}
      <input
        className="field"
        type="search"
        style={{ width }}
        value={text}
        placeholder={placeholder}
        onChange={(event) => setText(event.target.value)}
        onKeyDown={(event) => event.key === 'Enter' && send()}
        // whoever goes on to a link must not be called back by the filter
        onBlur={send}
      />
    </label>
  )
}

/** A day as 2026-12-01 in every country: the browser's own field would write it in the order of its language. */
export function FilterDay({ label, value, onChange }: ControlProps) {
  const [text, setText] = useState(value)
  const [seen, setSeen] = useState(value)
  if (seen !== value) {
    setSeen(value)
    setText(value)
  }
  const isOdd = text.trim().length >= 10 && parseDay(text) === null
  return (
    <label>
      {label}
      <input
        className="field"
        inputMode="numeric"
        autoComplete="off"
        placeholder="yyyy-mm-dd"
        style={{ width: 118 }}
        value={text}
        aria-invalid={isOdd || undefined}
        onChange={(event) => {
          setText(event.target.value)
          const typed = event.target.value.trim()
          // half a day filters nothing
          const day = typed.length >= 10 ? parseDay(typed) : typed === '' ? '' : null
          if (day !== null && day !== value) onChange(day)
        }}
      />
    </label>
  )
}
