const PLAIN = /^([-+]?)(\d*)\.?(\d*)$/

interface Parts {
  digits: string
  fraction: string
  isNegative: boolean
}

function partsOf(text: string | undefined): Parts | null {
  const match = PLAIN.exec(text?.trim() ?? '')
  const [, sign = '', digits = '', fraction = ''] = match ?? []
  if (digits + fraction === '') return null
  return { digits, fraction, isNegative: sign === '-' }
}

const scaled = ({ digits, fraction, isNegative }: Parts, places: number): bigint => {
  const size = BigInt(digits + fraction.padEnd(places, '0'))
  return isNegative ? -size : size
}

/** Exactly, as the server decides: in whole last digits, so that 0.3 nm off is never 0.30000000000001. Null while a number is missing. */
export function isWithinTolerance(check: {
  nominal: string | undefined
  found: string | undefined
  tolerance: string | undefined
}): boolean | null {
  const [nominal, found, tolerance] = [partsOf(check.nominal), partsOf(check.found), partsOf(check.tolerance)]
  if (!nominal || !found || !tolerance) return null
  const places = Math.max(nominal.fraction.length, found.fraction.length, tolerance.fraction.length)
  const difference = scaled(found, places) - scaled(nominal, places)
  const allowed = scaled(tolerance, places)
  return (difference < 0n ? -difference : difference) <= allowed
}
