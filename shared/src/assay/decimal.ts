import { Decimal as Base } from 'decimal.js'

/**
 * Decimal arithmetic on the shortest decimal form of a double: 1.35 is the tie 1.35, not the binary
 * neighbour 1.3500000000000000888, and 0.3 - 0.1 is 0.2.
 */
export const Decimal = Base.clone({ precision: 60, toExpNeg: -9e15, toExpPos: 9e15 })
export type DecimalValue = InstanceType<typeof Decimal>
