import { roundReported } from '@weirlight/shared/assay'
import { trueMinus } from '../../../lib/true-minus'

/** so many significant digits, trailing zeros kept */
export function significant(value: number | null | undefined, digits: number): string {
  if (value === null || value === undefined || !Number.isFinite(value)) return ''
  return roundReported(value, { to: 'significant', digits, ties: 'half-even' })
}

export function decimals(value: number | null | undefined, digits: number): string {
  if (value === null || value === undefined || !Number.isFinite(value)) return ''
  return roundReported(value, { to: 'decimals', digits, ties: 'half-even' })
}

const decimalsIn = (text: string) => /\.(\d+)$/.exec(text)?.[1]?.length ?? 0

/** Readings have four or five decimals: what is smaller than this is the dust of binary arithmetic, not scatter. */
const DUST = 1e-9
export const isDust = (value: number): boolean => Math.abs(value) < DUST

/** `0.19698 ± 0.00025`: the error to two digits, the value to the same place */
export function withError(value: number, error: number): string {
  if (!(error > 0) || isDust(error)) return trueMinus(significant(value, 5))
  const errorText = significant(error, 2)
  return `${trueMinus(decimals(value, Math.min(15, decimalsIn(errorText))))} ± ${errorText}`
}

/** `+4.9 %`, with a true minus sign */
export function signedPercent(value: number | null | undefined): string {
  const text = decimals(value, 1)
  if (text === '') return ''
  return `${Number(text) > 0 ? '+' : ''}${trueMinus(text)} %`
}

/** `11,000`, for molar absorptivities */
export function thousands(value: number | null | undefined, digits: number): string {
  return significant(value, digits).replace(/\B(?=(\d{3})+(?!\d))(?<!\.\d*)/g, ',')
}
