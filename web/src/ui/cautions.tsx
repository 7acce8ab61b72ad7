interface CautionsProps {
  /** hazard first: `strong acid: burns.`, or the two apart */
  items: readonly (string | { hazard: string; text: string })[]
}

function parted(item: CautionsProps['items'][number]) {
  if (typeof item !== 'string') return item
  const [hazard = '', ...rest] = item.split(': ')
  return rest.length === 0 ? { hazard: '', text: item } : { hazard, text: rest.join(': ') }
}

const capitalised = (text: string) => text.charAt(0).toUpperCase() + text.slice(1)

/** What may hurt, one hazard a line, in the small print of a page. */
export function Cautions({ items }: CautionsProps) {
  return (
    <ul className="cautions" aria-label="Cautions">
      {items.map((item) => {
        const { hazard, text } = parted(item)
        return (
          <li key={hazard + text}>
            {hazard !== '' && <strong>{capitalised(hazard)}.</strong>} {text}
          </li>
        )
      })}
    </ul>
  )
}
