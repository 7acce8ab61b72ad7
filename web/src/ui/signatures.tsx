import { useLaboratoryTime } from '../lib/use-laboratory-time'

interface SignaturesProps {
  items: readonly {
    id: string
    meaning: string
    printedName: string
    role: string
    at: string
    stands: boolean
  }[]
}

/** Who signed what, and whether the signature still stands. */
export function Signatures({ items }: SignaturesProps) {
  const { at } = useLaboratoryTime()
  if (items.length === 0) return <p className="quiet">Nobody yet</p>
  return (
    <ul className="check-list">
      {items.map((item) => (
        <li key={item.id} className="signature">
          <span>
            {item.meaning}: {item.printedName}, {item.role}, {at(item.at)}
            {!item.stands && (
              <strong className="above"> No longer stands: what was signed has changed.</strong>
            )}
          </span>
        </li>
      ))}
    </ul>
  )
}
