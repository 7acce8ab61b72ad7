import { Button, Input, Space, type InputProps } from 'antd'
import { useState } from 'react'
import { DAY_SENTENCE, MOMENT_SENTENCE, parseDay } from '../lib/time'
import { useLaboratoryTime } from '../lib/use-laboratory-time'

type Passed = Omit<InputProps, 'value' | 'onChange'>

interface TimeInputProps extends Passed {
  value?: string | null
  onChange?: (value: string) => void
}

/** A day as 2026-12-01, by keyboard. What cannot be read is passed on as typed, so that the contract names it. */
export function DayInput({ value, onChange, ...rest }: TimeInputProps) {
  const text = value ?? ''
  const isOdd = text.trim() !== '' && parseDay(text) === null
  return (
    <>
      <Input
        placeholder="2026-12-01"
        inputMode="numeric"
        autoComplete="off"
        {...rest}
        value={text}
        onChange={(event) => onChange?.(event.target.value)}
        onBlur={(event) => {
          const day = parseDay(text)
          if (day && day !== text) onChange?.(day)
          rest.onBlur?.(event)
        }}
      />
      {isOdd && text.length >= 10 && <span className="note above">{DAY_SENTENCE}</span>}
    </>
  )
}

/**
 * Date and time by the laboratory's clock, typed as 2026-12-01 14:05. The value is the instant with its offset
 * once it can be read, and the text as typed until then.
 */
export function MomentInput({ value, onChange, ...rest }: TimeInputProps) {
  const { parse, at, nowText, offset } = useLaboratoryTime()
  const isInstant = typeof value === 'string' && value.includes('T') && !Number.isNaN(Date.parse(value))
  const [draft, setDraft] = useState<string | null>(null)
  const shown = draft ?? (isInstant ? at(value) : (value ?? ''))
  const isOdd = draft === null && shown.trim() !== '' && parse(shown) === null
  const change = (text: string) => onChange?.(parse(text) ?? text)
  return (
    <>
      <Space.Compact block>
        <Input
          placeholder="2026-12-01 14:05"
          autoComplete="off"
          {...rest}
          value={shown}
          onFocus={(event) => {
            setDraft(shown)
            rest.onFocus?.(event)
          }}
          onChange={(event) => {
            setDraft(event.target.value)
            change(event.target.value)
          }}
          onBlur={(event) => {
            setDraft(null)
            rest.onBlur?.(event)
          }}
        />
        <Button
          onClick={() => {
            setDraft(null)
            change(nowText())
          }}
        >
          Now
        </Button>
      </Space.Compact>
      {isOdd && <span className="note above">{MOMENT_SENTENCE}</span>}
      {isInstant && <span className="note">Laboratory time, {offset(value)}</span>}
    </>
  )
}
