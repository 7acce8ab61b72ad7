import type { SelectHTMLAttributes } from 'react'
import './styles/pages.css'

export interface SelectOption {
  value: string
  label: string
  /** said instead of letting it be chosen */
  why?: string | null
}

interface SelectInputProps extends Omit<SelectHTMLAttributes<HTMLSelectElement>, 'value' | 'onChange'> {
  options: readonly SelectOption[]
  value?: string | null
  onChange?: (value: string | null) => void
  /** the words for “none of them”; left out, one must be chosen */
  none?: string
}

/** The browser's own select as a control of a form: works with keys, thumbs and screen readers alike. */
export function SelectInput({ options, value, onChange, none = 'Choose', ...rest }: SelectInputProps) {
  return (
    <select
      {...rest}
      className="field select-input"
      value={value ?? ''}
      onChange={(event) => onChange?.(event.target.value === '' ? null : event.target.value)}
    >
      <option value="">{none}</option>
      {options.map((option) => (
        <option key={option.value} value={option.value} disabled={!!option.why && option.value !== value}>
          {option.why ? `${option.label} — ${option.why}` : option.label}
        </option>
      ))}
    </select>
  )
}
