import { useId, type ReactNode } from 'react'

interface LabelledProps {
  label: string
  children: (id: string) => ReactNode
  error?: string | null
  hint?: ReactNode
  isWide?: boolean
}

/** A control with its name above and what is wrong with it below. */
export function Labelled({ label, children, error, hint, isWide = false }: LabelledProps) {
  const id = useId()
  return (
    <div className={isWide ? 'labelled wide' : 'labelled'}>
      <label className="labelled-name" htmlFor={id}>
        {label}
      </label>
      {children(id)}
      {error && (
        <span className="note above" role="alert">
          {error}
        </span>
      )}
      {hint && <span className="note">{hint}</span>}
    </div>
  )
}
