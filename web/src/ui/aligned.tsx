/** Splits a reported number at its point; `<0.010` and `± 0.02` keep what stands before the digits. */
function fractionLength(text: string): number {
  const match = /\.(\d+)\D*$/.exec(text)
  return match?.[1]?.length ?? 0
}

export function longestFraction(texts: readonly (string | null | undefined)[]): number {
  return texts.reduce((longest, text) => Math.max(longest, text ? fractionLength(text) : 0), 0)
}

/** Right-aligned text, padded with invisible figures so that the decimal points of a column stand in one line. */
export function Aligned({ text, places }: { text: string; places: number }) {
  if (!/\d/.test(text)) return <>{text}</>
  const own = fractionLength(text)
  const missing = places - own
  if (missing <= 0) return <>{text}</>
  return (
    <>
      {text}
      <span className="table-pad" aria-hidden="true">
        {own === 0 ? '.' : ''}
        {'0'.repeat(missing)}
      </span>
    </>
  )
}
