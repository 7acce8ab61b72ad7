interface MethodPickerProps {
  counts: readonly { methodId: string; methodTitle: string; waiting: number }[]
  value?: string
  onChange?: (value: string) => void
}

/** The methods with how many determinations wait for each. */
export function MethodPicker({ counts, value, onChange }: MethodPickerProps) {
  if (counts.length === 0) return <p className="quiet">Nothing waits for any method.</p>
  return (
    <div className="choice-list" role="radiogroup" aria-label="Method">
      {counts
        .toSorted((a, b) => Number(b.waiting > 0) - Number(a.waiting > 0))
        .map((each) => (
          <label key={each.methodId}>
            <input
              type="radio"
              name="method"
              checked={each.methodId === value}
              onChange={() => onChange?.(each.methodId)}
            />
            <span>
              {each.methodTitle}{' '}
              <span className="quiet">· {each.waiting === 0 ? 'none' : each.waiting} waiting</span>
            </span>
          </label>
        ))}
    </div>
  )
}
