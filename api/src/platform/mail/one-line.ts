const LONGEST = 250

/** For a subject made of names that people typed: line breaks would be refused as a forged header. */
export function oneLine(text: string): string {
  const line = text.replaceAll(/\s+/g, ' ').trim()
  return line.length <= LONGEST ? line : `${line.slice(0, LONGEST - 1)}…`
}
