import { Matrix, QrDecomposition } from 'ml-matrix'
import { AssayError } from './assay-error.js'
import { ExactSum, exactList, type ExactList } from './double-double.js'

/** The weighted design matrix and response in double-double; see least-squares.ts for the why. */
export interface Design {
  rows: number
  columns: number
  values: ExactList // row by row, each row times the root of its weight
  response: ExactList
}

const MAX_REFINEMENTS = 12

export function fillDesign(given: {
  design: Design
  scaledX: readonly number[]
  centre: number
  spread: number
  roots: Float64Array
  first: number
  y: readonly number[]
  yScale: number
}): void {
  const { design, scaledX, centre, spread, roots, first, y, yScale } = given
  const { rows, columns, values, response } = design
  const t = new ExactSum()
  const product = new ExactSum()
  for (let i = 0; i < rows; i += 1) {
    t.set(scaledX[i] ?? 0).add(-centre)
    const tHi = t.hi / spread
    const tLo = t.lo / spread
    let hi = roots[i] ?? 1
    let lo = 0
    product.set(0).addProduct(hi, 0, (y[i] ?? 0) / yScale, 0)
    response.hi[i] = product.hi
    response.lo[i] = product.lo
    for (let power = 0; power < columns + first; power += 1) {
      if (power > 0) {
        product.set(0).addProduct(hi, lo, tHi, tLo)
        hi = product.hi
        lo = product.lo
      }
      if (power < first) continue
      values.hi[i * columns + power - first] = hi
      values.lo[i * columns + power - first] = lo
    }
  }
}

/** Upper triangle of the QR factors, row by row. */
export function factor(design: Design): number[][] {
  const { rows, columns, values } = design
  const matrix = Matrix.from1DArray(rows, columns, Array.from(values.hi))
  const triangle = new QrDecomposition(matrix).upperTriangularMatrix.to2DArray()
  for (let j = 0; j < columns; j += 1) {
    let norm = 0
    for (let i = 0; i <= j; i += 1) norm = Math.max(norm, Math.abs(triangle[i]?.[j] ?? 0))
    const diagonal = Math.abs(triangle[j]?.[j] ?? 0)
    if (!(diagonal > norm * 1e-13)) throw tooClose()
  }
  return triangle
}

function tooClose(): AssayError {
  return new AssayError(
    'no-spread',
    'The concentrations (or the weights) lie too close together, or too far apart, to fit this model.',
  )
}

/** Solves R'R x = A'(b - A x) again and again, the residual in double-double: a corrected semi-normal equation. */
export function refine(
  design: Design,
  triangle: number[][],
): { solution: ExactList; residuals: Float64Array } {
  const { rows, columns, values, response } = design
  const solution = exactList(columns)
  const residuals = exactList(rows)
  const gradient = new Float64Array(columns)
  const sum = new ExactSum()
  let lastChange = Infinity
  for (let round = 0; round < MAX_REFINEMENTS; round += 1) {
    computeResiduals({ design, solution, residuals, sum })
    for (let j = 0; j < columns; j += 1) {
      sum.set(0)
      for (let i = 0; i < rows; i += 1) {
        const at = i * columns + j
        sum.addProduct(values.hi[at] ?? 0, values.lo[at] ?? 0, residuals.hi[i] ?? 0, residuals.lo[i] ?? 0)
      }
      gradient[j] = sum.value
    }
    solveNormal(triangle, gradient)
    let size = 0
    let change = 0
    for (let j = 0; j < columns; j += 1) {
      sum.set(solution.hi[j] ?? 0, solution.lo[j] ?? 0).add(gradient[j] ?? 0)
      solution.hi[j] = sum.hi
      solution.lo[j] = sum.lo
      size = Math.max(size, Math.abs(sum.hi))
      change = Math.max(change, Math.abs(gradient[j] ?? 0))
    }
    if (!Number.isFinite(change)) break
    if (change <= size * 1e-24 || (change >= lastChange / 4 && change <= size * 1e-15)) {
      computeResiduals({ design, solution, residuals, sum })
      return { solution, residuals: residuals.hi }
    }
    lastChange = change
  }
  const hasNumbers = response.hi.every(Number.isFinite) && values.hi.every(Number.isFinite)
  if (hasNumbers) throw tooClose()
  throw new AssayError(
    'numerical-overflow',
    'These numbers are too large or too small to fit. Check the unit.',
  )
}

function computeResiduals(given: {
  design: Design
  solution: ExactList
  residuals: ExactList
  sum: ExactSum
}): void {
  const { design, solution, residuals, sum } = given
  const { rows, columns, values, response } = design
  for (let i = 0; i < rows; i += 1) {
    sum.set(response.hi[i] ?? 0, response.lo[i] ?? 0)
    for (let j = 0; j < columns; j += 1) {
      const at = i * columns + j
      sum.addProduct(-(values.hi[at] ?? 0), -(values.lo[at] ?? 0), solution.hi[j] ?? 0, solution.lo[j] ?? 0)
    }
    residuals.hi[i] = sum.hi
    residuals.lo[i] = sum.lo
  }
}

/** Replaces g by (R'R)^-1 g. */
function solveNormal(triangle: number[][], g: Float64Array): void {
  const size = g.length
  for (let j = 0; j < size; j += 1) {
    let value = g[j] ?? 0
    for (let i = 0; i < j; i += 1) value -= (triangle[i]?.[j] ?? 0) * (g[i] ?? 0)
    g[j] = value / (triangle[j]?.[j] ?? 1)
  }
  for (let j = size - 1; j >= 0; j -= 1) {
    let value = g[j] ?? 0
    for (let k = j + 1; k < size; k += 1) value -= (triangle[j]?.[k] ?? 0) * (g[k] ?? 0)
    g[j] = value / (triangle[j]?.[j] ?? 1)
  }
}

/** R^-1, column by column: inverse[k][j] is row j of column k. */
export function invertTriangle(triangle: number[][]): number[][] {
  const size = triangle.length
  return Array.from({ length: size }, (_, k) => {
    const column = new Array<number>(size).fill(0)
    for (let j = k; j >= 0; j -= 1) {
      let value = j === k ? 1 : 0
      for (let i = j + 1; i <= k; i += 1) value -= (triangle[j]?.[i] ?? 0) * (column[i] ?? 0)
      column[j] = value / (triangle[j]?.[j] ?? 1)
    }
    return column
  })
}

export function leveragesOf(design: Design, inverse: number[][]): number[] {
  const { rows, columns, values } = design
  return Array.from({ length: rows }, (_, i) => {
    let leverage = 0
    for (const column of inverse) {
      let value = 0
      for (let j = 0; j < columns; j += 1) value += (values.hi[i * columns + j] ?? 0) * (column[j] ?? 0)
      leverage += value * value
    }
    return Math.min(1, leverage)
  })
}
