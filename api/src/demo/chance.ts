/** Chance from a fixed seed, so that every installation has the same demonstration. Mulberry32. */
export class Chance {
  private state: number

  constructor(seed: number) {
    this.state = seed >>> 0
  }

  /** 0 ≤ x < 1 */
  next(): number {
    this.state = (this.state + 0x6d2b79f5) >>> 0
    let mixed = Math.imul(this.state ^ (this.state >>> 15), 1 | this.state)
    mixed = (mixed + Math.imul(mixed ^ (mixed >>> 7), 61 | mixed)) ^ mixed
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4_294_967_296
  }

  between(low: number, high: number): number {
    return low + (high - low) * this.next()
  }

  whole(low: number, high: number): number {
    return Math.floor(this.between(low, high + 1))
  }

  pick<T>(list: readonly T[]): T {
    const found = list[Math.floor(this.next() * list.length)]
    if (found === undefined) throw new Error('Nothing to pick from.')
    return found
  }

  shuffle<T>(list: readonly T[]): T[] {
    const keyed = list.map((item) => ({ item, key: this.next() }))
    return keyed.sort((a, b) => a.key - b.key).map(({ item }) => item)
  }

  /** normal with mean 0 (Box and Muller) */
  normal(deviation: number): number {
    return deviation * Math.sqrt(-2 * Math.log(1 - this.next())) * Math.cos(2 * Math.PI * this.next())
  }

  uuid(): string {
    const hex = Array.from({ length: 32 }, () => Math.floor(this.next() * 16).toString(16))
    hex[12] = '4'
    hex[16] = (8 + Math.floor(this.next() * 4)).toString(16)
    const text = hex.join('')
    return [text.slice(0, 8), text.slice(8, 12), text.slice(12, 16), text.slice(16, 20), text.slice(20)].join(
      '-',
    )
  }
}
