import { decimalText } from '@weirlight/shared/contracts'
import { Input, type InputProps } from 'antd'
import { useId, type FocusEvent } from 'react'

export interface DecimalRange {
  low: number
  high: number
  /** completes “Enter the …” */
  what: string
  unit?: string
}

/** What is wrong with a number as typed, in the words of the contract; null when nothing is. */
export function decimalProblem(text: string, range: DecimalRange): string | null {
  const result = decimalText(range).safeParse(text)
  return result.success ? null : (result.error.issues[0]?.message ?? null)
}

const COMMA = /^\s*([-+]?\d+),(\d+)\s*$/

interface DecimalInputProps extends Omit<InputProps, 'value' | 'onChange' | 'type'> {
  value?: string
  onChange?: (text: string) => void
}

/**
 * A number kept exactly as typed, trailing zeros and all. A decimal comma is named while it is typed, never turned
 * into a point silently: whether 1,234 means one or a thousand is for the person to say.
 */
export function DecimalInput({ value = '', onChange, ...rest }: DecimalInputProps) {
  const hintId = useId()
  const comma = COMMA.exec(value)
  return (
    <>
      <Input
        inputMode="decimal"
        autoComplete="off"
        {...rest}
        value={value}
        onFocus={(event: FocusEvent<HTMLInputElement>) => {
          event.target.select()
          rest.onFocus?.(event)
        }}
        onChange={(event) => onChange?.(event.target.value)}
        {...(comma ? { status: 'error' as const, 'aria-describedby': hintId } : {})}
      />
      {comma && (
        <span id={hintId} className="note above" role="alert">
          Use a decimal point: {comma[1]}.{comma[2]}
        </span>
      )}
    </>
  )
}
