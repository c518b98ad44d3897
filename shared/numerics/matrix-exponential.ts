import { solveInPlace } from './linear'

/** Square matrices here are flat, row after row, so that the inner loops run over plain numbers. */

/** Coefficients of the [13/13] Padé approximant of e^x. */
const pade = [
  64764752532480000, 32382376266240000, 7771770303897600, 1187353796428800, 129060195264000, 10559470521600, 670442572800,
  33522128640, 1323241920, 40840800, 960960, 16380, 182, 1,
]
/** 1-norm up to which that approximant is good to double precision. */
const padeRadius = 5.37

/**
 * e^A for a square matrix of size n, by scaling and squaring of the [13/13] Padé approximant.
 * Source: N. J. Higham, "The scaling and squaring method for the matrix exponential revisited", SIAM J. Matrix Anal. Appl. 26 (2005).
 * @param a n*n entries, row after row
 * @returns n*n entries; not finite where A is not
 */
export function matrixExponential(a: Float64Array, n: number): Float64Array {
  const squarings = Math.max(0, Math.ceil(Math.log2(oneNorm(a, n) / padeRadius)))
  if (!Number.isFinite(squarings)) return new Float64Array(n * n).fill(NaN)
  const scaled = a.map(entry => entry * 2 ** -squarings)
  const a2 = product(scaled, scaled, n)
  const a4 = product(a2, a2, n)
  const a6 = product(a2, a4, n)
  const odd = product(scaled, padeHalf(a2, a4, a6, n, 1), n)
  const even = padeHalf(a2, a4, a6, n, 0)
  const sum = even.map((entry, i) => entry + odd[i]!)
  const difference = even.map((entry, i) => entry - odd[i]!)
  let result = solveInPlace(difference, sum, n, n)
  for (let i = 0; i < squarings; i++) result = product(result, result, n)
  return result
}

/** A x. */
export function applyMatrix(a: Float64Array, x: Float64Array): Float64Array {
  const n = x.length
  const y = new Float64Array(n)
  for (let i = 0; i < n; i++) {
    let sum = 0
    for (let j = 0, k = i * n; j < n; j++, k++) sum += a[k]! * x[j]!
    y[i] = sum
  }
  return y
}

/** The even (parity 0) or the odd (parity 1, one factor A taken out) half of the approximant's numerator. */
function padeHalf(a2: Float64Array, a4: Float64Array, a6: Float64Array, n: number, parity: 0 | 1): Float64Array {
  const b = (power: number) => pade[power + parity]!
  const inner = a6.map((entry, i) => b(12) * entry + b(10) * a4[i]! + b(8) * a2[i]!)
  const half = product(a6, inner, n)
  for (let i = 0; i < n * n; i++) half[i]! += b(6) * a6[i]! + b(4) * a4[i]! + b(2) * a2[i]!
  for (let i = 0; i < n; i++) half[i * n + i]! += b(0)
  return half
}

function oneNorm(a: Float64Array, n: number): number {
  let largest = 0
  for (let j = 0; j < n; j++) {
    let sum = 0
    for (let i = 0; i < n; i++) sum += Math.abs(a[i * n + j]!)
    if (!(sum <= largest)) largest = sum
  }
  return largest
}

function product(a: Float64Array, b: Float64Array, n: number): Float64Array {
  const result = new Float64Array(n * n)
  for (let i = 0; i < n; i++) {
    for (let k = 0; k < n; k++) {
      const factor = a[i * n + k]!
      if (factor === 0) continue
      for (let j = 0; j < n; j++) result[i * n + j]! += factor * b[k * n + j]!
    }
  }
  return result
}
