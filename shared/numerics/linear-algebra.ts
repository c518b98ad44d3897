/** Dense real matrices as arrays of rows. No function changes its arguments. */
export type Matrix = readonly (readonly number[])[]

export function identity(n: number): number[][] {
  return Array.from({ length: n }, (_, i) => Array.from({ length: n }, (_, j) => i === j ? 1 : 0))
}

export function multiplyMatrices(a: Matrix, b: Matrix): number[][] {
  const columns = b[0]?.length ?? 0
  return a.map((row) => {
    const product = new Array<number>(columns).fill(0)
    row.forEach((factor, k) => {
      if (factor === 0) return
      const other = b[k]!
      for (let j = 0; j < columns; j++) product[j]! += factor * other[j]!
    })
    return product
  })
}

export function multiplyVector(a: Matrix, x: readonly number[]): number[] {
  return a.map(row => row.reduce((sum, factor, j) => sum + factor * x[j]!, 0))
}

/**
 * x with A x = b, by elimination with row scaling and partial pivoting.
 * @returns null where A is singular to working precision (a pivot below 1e-14 of its row's size).
 */
export function solveLinear(a: Matrix, b: readonly number[]): number[] | null {
  const n = b.length
  const rows = a.map((row, i) => {
    const size = Math.max(...row.map(Math.abs))
    return size > 0 ? [...row.map(value => value / size), b[i]! / size] : null
  })
  if (rows.some(row => row === null)) return null
  const work = rows as number[][]
  for (let k = 0; k < n; k++) {
    let pivot = k
    for (let i = k + 1; i < n; i++) if (Math.abs(work[i]![k]!) > Math.abs(work[pivot]![k]!)) pivot = i
    if (!(Math.abs(work[pivot]![k]!) > 1e-14)) return null
    ;[work[k], work[pivot]] = [work[pivot]!, work[k]!]
    for (let i = k + 1; i < n; i++) {
      const factor = work[i]![k]! / work[k]![k]!
      for (let j = k; j <= n; j++) work[i]![j]! -= factor * work[k]![j]!
    }
  }
  const x = new Array<number>(n).fill(0)
  for (let i = n - 1; i >= 0; i--) {
    let value = work[i]![n]!
    for (let j = i + 1; j < n; j++) value -= work[i]![j]! * x[j]!
    x[i] = value / work[i]![i]!
  }
  return x
}
