import { describe, expect, it } from 'vitest'
import { DARK, LIGHT, type Tokens } from './theme'

// relative luminance and contrast ratio as WCAG 2.1 defines them; the thresholds are its level AA
function luminance(hex: string): number {
  const channel = (at: number) => {
    const value = Number.parseInt(hex.slice(at, at + 2), 16) / 255
    return value <= 0.04045 ? value / 12.92 : ((value + 0.055) / 1.055) ** 2.4
  }
  return 0.2126 * channel(1) + 0.7152 * channel(3) + 0.0722 * channel(5)
}
function contrast(a: string, b: string): number {
  const [low, high] = [luminance(a), luminance(b)].toSorted((x, y) => x - y)
  return ((high ?? 0) + 0.05) / ((low ?? 0) + 0.05)
}

const TEXT = 4.5
const SHAPE = 3
const grounds = ['paper', 'sheet', 'qcRow', 'weirSoft'] as const
const inks = ['ink', 'quiet', 'weir', 'meets', 'caution', 'above'] as const
const pairs: [ink: keyof Tokens, ground: keyof Tokens, atLeast: number][] = [
  ...grounds.flatMap((ground) =>
    inks.map((ink): [keyof Tokens, keyof Tokens, number] => [ink, ground, TEXT]),
  ),
  ['copper', 'paper', TEXT],
  ['copper', 'sheet', TEXT],
  ['onWeir', 'weir', TEXT],
  ['onAbove', 'above', TEXT],
  ['ink', 'hair', TEXT],
  ['ink', 'cautionSoft', TEXT],
  ['caution', 'cautionSoft', TEXT],
  ['ink', 'aboveSoft', TEXT],
  ['above', 'aboveSoft', TEXT],
  ['paper', 'ink', TEXT],
  ['field', 'sheet', SHAPE],
  ['field', 'paper', SHAPE],
  ['glass', 'sheet', SHAPE],
]

describe.each([
  ['light', LIGHT],
  ['dark', DARK],
])('%s', (_, tokens) => {
  it.each(pairs)('%s on %s reaches %d', (ink, ground, atLeast) => {
    expect(contrast(tokens[ink], tokens[ground])).toBeGreaterThanOrEqual(atLeast)
  })
})
