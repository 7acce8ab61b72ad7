import type { Choice } from '../draft/lots'

interface ChoiceSelectProps {
  choices: readonly Choice[]
  value?: string | null
  onChange?: (value: string | null) => void
  id?: string
  /** the words for “none of them” */
  none?: string
  label?: string
  /** in a row of a grid */
  isShort?: boolean
}

/** What cannot be chosen stays in the list and says why. */
export function ChoiceSelect(props: ChoiceSelectProps) {
  const { choices, value, onChange, id, none = 'Choose', label, isShort = false } = props
  return (
    <select
      className={isShort ? 'field choice-short' : 'field choice-select'}
      id={id}
      aria-label={label}
      value={value ?? ''}
      onChange={(event) => onChange?.(event.target.value === '' ? null : event.target.value)}
    >
      <option value="">{none}</option>
      {choices.map((choice) => (
        <option
          key={choice.value}
          value={choice.value}
          // one that ran out after it was chosen stays visible as what it is
          disabled={choice.why !== null && choice.value !== value}
        >
          {choice.why ? `${choice.label} — ${choice.why}` : choice.label}
        </option>
      ))}
    </select>
  )
}

interface ChoiceListProps {
  choices: readonly Choice[]
  value?: string[]
  onChange?: (value: string[]) => void
  empty: string
}

/** Several of a short list, the unusable ones greyed with their reason. */
export function ChoiceList({ choices, value = [], onChange, empty }: ChoiceListProps) {
  if (choices.length === 0) return <p className="note">{empty}</p>
  return (
    <div className="choice-list">
      {choices.map((choice) => {
        const isChosen = value.includes(choice.value)
        return (
          <label key={choice.value} className={choice.why ? 'quiet' : undefined}>
            <input
              type="checkbox"
              checked={isChosen}
              disabled={choice.why !== null && !isChosen}
              onChange={() =>
                onChange?.(
                  isChosen ? value.filter((each) => each !== choice.value) : [...value, choice.value],
                )
              }
            />
            <span>
              {choice.label}
              {choice.why && <strong> — {choice.why}</strong>}
            </span>
          </label>
        )
      })}
    </div>
  )
}
