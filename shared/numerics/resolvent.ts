import { divide, multiply, type Complex } from './complex'
import { toHessenberg } from './eigenvalues'

/**
 * c (z I - A)^-1 b for one real matrix and many z: A is brought to Hessenberg form once, so that each z costs n^2 operations.
 * Source: A. J. Laub, "Efficient multivariable frequency response computations", IEEE Trans. Automatic Control 26 (1981).
 */
export class Resolvent {
  private readonly h: Float64Array
  private readonly columns: Float64Array[]
  private readonly rows: Float64Array[]

  /**
   * @param a n*n entries, row after row
   * @param columns the b
   * @param rows the c
   */
  constructor(a: Float64Array, private readonly n: number, columns: readonly Float64Array[], rows: readonly Float64Array[]) {
    this.h = a.slice()
    this.columns = columns.map(column => column.slice())
    this.rows = rows.map(row => row.slice())
    toHessenberg(this.h, n, [...this.columns, ...this.rows])
  }

  /**
   * Every row times the solution for the given combination of columns.
   * @param weights one for each column
   */
  at(z: Complex, weights: readonly Complex[]): Complex[] {
    const { n, h } = this
    const re = h.map(entry => -entry)
    const im = new Float64Array(n * n)
    for (let i = 0; i < n; i++) {
      re[i * n + i]! += z.re
      im[i * n + i] = z.im
    }
    const x = Array.from({ length: n }, (_, i): Complex => this.columns.reduce((sum, column, k) =>
      ({ re: sum.re + column[i]! * weights[k]!.re, im: sum.im + column[i]! * weights[k]!.im }), { re: 0, im: 0 }))
    eliminate(re, im, x, n)
    return this.rows.map(row => x.reduce((sum, value, i) => ({ re: sum.re + row[i]! * value.re, im: sum.im + row[i]! * value.im }), { re: 0, im: 0 }))
  }
}

/** Solves a Hessenberg system in place, by elimination with the larger of two neighbouring rows as pivot. */
function eliminate(re: Float64Array, im: Float64Array, x: Complex[], n: number): void {
  for (let k = 0; k + 1 < n; k++) {
    const [here, below] = [k * n, (k + 1) * n]
    if (Math.hypot(re[below + k]!, im[below + k]!) > Math.hypot(re[here + k]!, im[here + k]!)) {
      for (let j = k; j < n; j++) {
        [re[here + j], re[below + j]] = [re[below + j]!, re[here + j]!];
        [im[here + j], im[below + j]] = [im[below + j]!, im[here + j]!]
      }
      [x[k], x[k + 1]] = [x[k + 1]!, x[k]!]
    }
    const factor = divide({ re: re[below + k]!, im: im[below + k]! }, { re: re[here + k]!, im: im[here + k]! })
    for (let j = k; j < n; j++) {
      const [a, b] = [re[here + j]!, im[here + j]!]
      re[below + j]! -= factor.re * a - factor.im * b
      im[below + j]! -= factor.re * b + factor.im * a
    }
    const moved = multiply(factor, x[k]!)
    x[k + 1] = { re: x[k + 1]!.re - moved.re, im: x[k + 1]!.im - moved.im }
  }
  for (let i = n - 1; i >= 0; i--) {
    let { re: a, im: b } = x[i]!
    for (let j = i + 1; j < n; j++) {
      const [p, q] = [re[i * n + j]!, im[i * n + j]!]
      a -= p * x[j]!.re - q * x[j]!.im
      b -= p * x[j]!.im + q * x[j]!.re
    }
    x[i] = divide({ re: a, im: b }, { re: re[i * n + i]!, im: im[i * n + i]! })
  }
}
