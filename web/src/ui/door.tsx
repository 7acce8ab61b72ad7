import { useId, useState, type FormEvent, type InputHTMLAttributes, type ReactNode } from 'react'
import { useTitle } from '../lib/use-title'
import { WeirMark } from './weir-mark'

/** A page without a session: one narrow sheet. */
export function Door({ title, children }: { title: string; children: ReactNode }) {
  useTitle(title)
  return (
    <main className="door">
      <div className="door-sheet">
        <WeirMark />
        <h1>{title}</h1>
        {children}
      </div>
    </main>
  )
}

interface DoorFieldProps extends InputHTMLAttributes<HTMLInputElement> {
  label: string
  error?: string | undefined
  hint?: ReactNode
}

/** A labelled field of the browser's own, so that the first page a person meets is small and works at once. */
export function DoorField({ label, error, hint, ...input }: DoorFieldProps) {
  const id = useId()
  const [isShown, setShown] = useState(false)
  const isSecret = input.type === 'password'
  return (
    <div className="door-field">
      <label htmlFor={id}>{label}</label>
      <span className="door-input">
        <input
          {...input}
          id={id}
          type={isSecret && isShown ? 'text' : input.type}
          className="field"
          aria-invalid={error !== undefined}
          aria-describedby={`${id}-note`}
        />
        {isSecret && (
          <button
            type="button"
            className="button plain"
            aria-pressed={isShown}
            onClick={() => setShown(!isShown)}
          >
            {isShown ? 'Hide' : 'Show'}
            <span className="visually-hidden"> passphrase</span>
          </button>
        )}
      </span>
      <span id={`${id}-note`} className={error ? 'note above' : 'note'} role={error ? 'alert' : undefined}>
        {error ?? hint}
      </span>
    </div>
  )
}

/** Reads a form of the browser's own into an object of texts. */
export function formTexts(event: FormEvent<HTMLFormElement>): Record<string, string> {
  event.preventDefault()
  const entries = [...new FormData(event.currentTarget)].map(([name, value]) => [name, String(value)])
  return Object.fromEntries(entries) as Record<string, string>
}
