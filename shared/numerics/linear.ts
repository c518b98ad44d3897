/**
 * X with A X = B, by elimination with partial pivoting. Entries are not finite where A is singular.
 * @param a n*n entries, row after row; left untouched
 * @param b n*columns entries; left untouched
 */
export function solveLinear(a: Float64Array, b: Float64Array, n: number, columns: number): Float64Array {
  return solveInPlace(a.slice(), b.slice(), n, columns)
}

/** As `solveLinear`, overwriting both. */
export function solveInPlace(a: Float64Array, b: Float64Array, n: number, columns: number): Float64Array {
  for (let k = 0; k < n; k++) {
    let pivot = k
    for (let i = k + 1; i < n; i++) if (Math.abs(a[i * n + k]!) > Math.abs(a[pivot * n + k]!)) pivot = i
    if (pivot !== k) {
      swapRows(a, k, pivot, n)
      swapRows(b, k, pivot, columns)
    }
    for (let i = k + 1; i < n; i++) {
      const factor = a[i * n + k]! / a[k * n + k]!
      if (factor === 0) continue
      for (let j = k + 1; j < n; j++) a[i * n + j]! -= factor * a[k * n + j]!
      for (let j = 0; j < columns; j++) b[i * columns + j]! -= factor * b[k * columns + j]!
    }
  }
  for (let i = n - 1; i >= 0; i--) {
    for (let k = i + 1; k < n; k++) {
      const factor = a[i * n + k]!
      if (factor !== 0) for (let j = 0; j < columns; j++) b[i * columns + j]! -= factor * b[k * columns + j]!
    }
    for (let j = 0; j < columns; j++) b[i * columns + j]! /= a[i * n + i]!
  }
  return b
}

function swapRows(a: Float64Array, i: number, k: number, columns: number): void {
  for (let j = 0; j < columns; j++) {
    const entry = a[i * columns + j]!
    a[i * columns + j] = a[k * columns + j]!
    a[k * columns + j] = entry
  }
}
