/**
 * Arithmetic with about 32 digits: a number is the unevaluated sum hi + lo of two doubles.
 *
 * The fits need it in two places: for the residuals while a solution is refined, and for the change from the
 * centred basis back to powers of the concentration, where large terms cancel. Dekker (1971) splits the products,
 * Knuth's two-sum keeps the rounding error of every addition. No fused operation and no library function is used,
 * so that every machine gives the same double.
 */

const SPLITTER = 134217729 // 2^27 + 1

/** A running sum with twice the digits; the object is reused in hot loops. */
export class ExactSum {
  hi = 0
  lo = 0

  set(hi: number, lo = 0): this {
    this.hi = hi
    this.lo = lo
    return this
  }

  add(hi: number, lo = 0): this {
    const s = this.hi + hi
    const v = s - this.hi
    const e = this.hi - (s - v) + (hi - v)
    const t = this.lo + lo
    const w = t - this.lo
    const f = this.lo - (t - w) + (lo - w)
    const c = e + t
    const vh = s + c
    const vl = c - (vh - s)
    const d = f + vl
    this.hi = vh + d
    this.lo = d - (this.hi - vh)
    return this
  }

  /** Adds (aHi + aLo)(bHi + bLo). */
  addProduct(aHi: number, aLo: number, bHi: number, bLo: number): this {
    const p = aHi * bHi
    const ta = SPLITTER * aHi
    const a1 = ta - (ta - aHi)
    const a2 = aHi - a1
    const tb = SPLITTER * bHi
    const b1 = tb - (tb - bHi)
    const b2 = bHi - b1
    const e = a1 * b1 - p + a1 * b2 + a2 * b1 + a2 * b2 + (aHi * bLo + aLo * bHi)
    return this.add(p, e)
  }

  get value(): number {
    return this.hi + this.lo
  }
}

/** Sum of doubles, rounded once. */
export function exactSum(values: readonly number[]): number {
  const sum = new ExactSum()
  for (const value of values) sum.add(value)
  return sum.value
}

/** A list of numbers with twice the digits. */
export interface ExactList {
  hi: Float64Array
  lo: Float64Array
}

export function exactList(length: number): ExactList {
  return { hi: new Float64Array(length), lo: new Float64Array(length) }
}

/**
 * Coefficients of p(u), u = x - m, rewritten in powers of x: repeated Horner steps, in place.
 */
export function shiftPolynomial(coefficients: ExactList, m: number): void {
  const { hi, lo } = coefficients
  const degree = hi.length - 1
  const sum = new ExactSum()
  for (let first = 0; first < degree; first += 1) {
    for (let j = degree - 1; j >= first; j -= 1) {
      sum.set(hi[j] ?? 0, lo[j] ?? 0).addProduct(-m, 0, hi[j + 1] ?? 0, lo[j + 1] ?? 0)
      hi[j] = sum.hi
      lo[j] = sum.lo
    }
  }
}

const bits = new DataView(new ArrayBuffer(8))

/** The power of two at or below |value| (1 for zero): dividing by it changes no digit. */
export function powerOfTwoOf(value: number): number {
  if (value === 0) return 1
  bits.setFloat64(0, value)
  const exponent = bits.getUint16(0) & 0x7ff0
  if (exponent === 0) return 2 ** -1022
  bits.setFloat64(0, 0)
  bits.setUint16(0, exponent)
  return bits.getFloat64(0)
}
