import { AssayError } from './assay-error.js'

export interface ChartConstants {
  /** mean of the range of n normal values, in standard deviations */
  d2: number
  /** standard deviation of that range */
  d3: number
  /** mean of the standard deviation of n normal values */
  c4: number
  A2: number
  D3: number
  D4: number
  /** limits of single values from the mean moving range, 3 / d2 */
  E2: number
}

/**
 * d2, d3, c4 for n = 2 to 25. d2 and d3 by numerical integration of the distribution of the range (Gauss-Legendre, 600
 * nodes), c4 from gamma functions; agrees with ASTM E2587 to its three or four decimals.
 */
const EXACT: readonly (readonly [number, number, number])[] = [
  [1.1283791670955126, 0.8525024664274217, 0.797884560802865],
  [1.692568750643, 0.88836800405, 0.886226925452758],
  [2.058750746008, 0.87980820282, 0.921317731923561],
  [2.325928947281, 0.8640819411, 0.939985602986625],
  [2.534412721223, 0.84803968612, 0.951532861948145],
  [2.704356751214, 0.83320533562, 0.959368788699833],
  [2.84720061209, 0.81983148979, 0.965030456147372],
  [2.970026324418, 0.80783427455, 0.969310699713954],
  [3.07750546167, 0.79705067352, 0.972659274121588],
  [3.172872703816, 0.78731462055, 0.975350077145229],
  [3.258455279744, 0.7784783412, 0.977559351854772],
  [3.335980354098, 0.77041620206, 0.979405604314218],
  [3.4067631082, 0.76302309562, 0.980971436755516],
  [3.471826889882, 0.75621142973, 0.982316177162651],
  [3.53198278611, 0.74990808941, 0.983483531615841],
  [3.587883961765, 0.74405178396, 0.984506405471832],
  [3.640063757937, 0.73859085338, 0.985410043808079],
  [3.688963023208, 0.73348149552, 0.986214136860194],
  [3.734950119597, 0.72868634571, 0.986934267524655],
  [3.778335829843, 0.72417334072, 0.987582928826156],
  [3.819384643363, 0.71991480843, 0.988170253315831],
  [3.858323423285, 0.71588673549, 0.988704545233999],
  [3.895348148451, 0.71206817515, 0.989192674958505],
  [3.930629219507, 0.70844076589, 0.989640375585703],
]

/** Three decimals as printed for n = 2 to 10 (ASTM E2587, Montgomery appendix VI): d2, d3, A2, D3, D4. */
const PRINTED: readonly (readonly [number, number, number, number, number])[] = [
  [1.128, 0.853, 1.88, 0, 3.267],
  [1.693, 0.888, 1.023, 0, 2.574],
  [2.059, 0.88, 0.729, 0, 2.282],
  [2.326, 0.864, 0.577, 0, 2.114],
  [2.534, 0.848, 0.483, 0, 2.004],
  [2.704, 0.833, 0.419, 0.076, 1.924],
  [2.847, 0.82, 0.373, 0.136, 1.864],
  [2.97, 0.808, 0.337, 0.184, 1.816],
  [3.078, 0.797, 0.308, 0.223, 1.777],
]

export type ConstantsFrom = 'exact' | 'printed'

/**
 * Shewhart chart constants for subgroups of n.
 *
 * Laboratories calculate with the printed three decimals or with exact constants; `from` says which. Printed ones end
 * at n = 10. One published table prints D4 for n = 5 as 2.115; 2.114 is right.
 * Source: ASTM E2587; ISO 7870-2:2013 table 2.
 * @throws AssayError invalid-argument: n outside 2 to 25 (2 to 10 printed)
 */
export function chartConstants(n: number, from: ConstantsFrom = 'exact'): ChartConstants {
  const exact = EXACT[n - 2]
  const printed = PRINTED[n - 2]
  if (!exact || (from === 'printed' && !printed)) {
    throw new AssayError(
      'invalid-argument',
      `Chart constants are known for 2 to ${from === 'printed' ? 10 : 25} values in a group.`,
    )
  }
  const [, , c4] = exact
  if (from === 'printed' && printed) {
    const [d2, d3, A2, D3, D4] = printed
    return { d2, d3, c4, A2, D3, D4, E2: 3 / d2 }
  }
  const [d2, d3] = exact
  return {
    d2,
    d3,
    c4,
    A2: 3 / (d2 * Math.sqrt(n)),
    D3: Math.max(0, 1 - (3 * d3) / d2),
    D4: 1 + (3 * d3) / d2,
    E2: 3 / d2,
  }
}
