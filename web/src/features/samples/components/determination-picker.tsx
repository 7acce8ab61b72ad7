import { useQuery } from '@tanstack/react-query'
import { determinationName } from '@weirlight/shared/contracts'
import { Loaded } from '../../../ui'
import { methodsQuery } from '../../methods'

interface Wanted {
  methodId: string
}

interface DeterminationPickerProps {
  value?: Wanted[]
  onChange?: (value: Wanted[]) => void
  id?: string
}

/** What is to be determined, by method; in the order of the laboratory’s list. */
export function DeterminationPicker({ value = [], onChange, id }: DeterminationPickerProps) {
  const chosen = new Set(value.map((each) => each.methodId))
  return (
    <Loaded query={useQuery(methodsQuery)}>
      {({ items }) => {
        const methods = items.filter((method) => method.active)
        const toggle = (methodId: string) => {
          const next = new Set(chosen)
          if (!next.delete(methodId)) next.add(methodId)
          onChange?.(
            methods.filter((method) => next.has(method.id)).map((method) => ({ methodId: method.id })),
          )
        }
        return (
          <div
            className="method-choices"
            id={id}
            tabIndex={-1}
            role="group"
            aria-label="Determinations by method"
          >
            {methods.map((method) => (
              <label key={method.id}>
                <input type="checkbox" checked={chosen.has(method.id)} onChange={() => toggle(method.id)} />
                <span>
                  {determinationName(method.analyte, method.form)}
                  <br />
                  <span className="note">
                    {method.title}
                    {method.calibrationsInForce === 0 && ', no calibration in force'}
                  </span>
                </span>
              </label>
            ))}
          </div>
        )
      }}
    </Loaded>
  )
}
