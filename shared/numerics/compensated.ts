import type { Complex } from './complex'

/**
 * Polynomial evaluation as if in twice the working precision: compensated Horner on error-free transformations.
 * S. Graillat, P. Langlois, N. Louvet, "Compensated Horner scheme" (2005); T. J. Dekker, "A floating-point technique for extending the
 * available precision" (1971).
 */
const splitter = 134217729 // 2^27 + 1

/** The rounding error of a * b, exactly, while nothing overflows or underflows. */
export function productError(a: number, b: number, product: number): number {
  const bigA = splitter * a
  const highA = bigA - (bigA - a)
  const lowA = a - highA
  const bigB = splitter * b
  const highB = bigB - (bigB - b)
  const lowB = b - highB
  return lowA * lowB - (((product - highA * highB) - lowA * highB) - highA * lowB)
}

/** The rounding error of a + b, exactly. */
function sumError(a: number, b: number, sum: number): number {
  const part = sum - a
  return (a - (sum - part)) + (b - part)
}

/** p(x) for a real x. */
export function evaluateCompensated(p: ArrayLike<number>, x: number): number {
  let value = p[0]!
  let error = 0
  for (let i = 1; i < p.length; i++) {
    const product = value * x
    const sum = product + p[i]!
    error = error * x + (productError(value, x, product) + sumError(product, p[i]!, sum))
    value = sum
  }
  return value + error
}

/** p(x + jy), written to `out` as [re, im]; `out` spares an allocation in the innermost loop of the root finder. */
export function evaluateComplexCompensated(p: ArrayLike<number>, x: number, y: number, out: Float64Array): void {
  let re = p[0]!
  let im = 0
  let errorRe = 0
  let errorIm = 0
  for (let i = 1; i < p.length; i++) {
    const coefficient = p[i]!
    const reX = re * x
    const imY = im * y
    const difference = reX - imY
    const nextRe = difference + coefficient
    const reY = re * y
    const imX = im * x
    const nextIm = reY + imX
    const lostRe = productError(re, x, reX) - productError(im, y, imY) + sumError(reX, -imY, difference) + sumError(difference, coefficient, nextRe)
    const lostIm = productError(re, y, reY) + productError(im, x, imX) + sumError(reY, imX, nextIm)
    const carried = errorRe * x - errorIm * y
    errorIm = errorRe * y + errorIm * x + lostIm
    errorRe = carried + lostRe
    re = nextRe
    im = nextIm
  }
  out[0] = re + errorRe
  out[1] = im + errorIm
}

/** p(s) for a complex s, good to the last digits also close to a root. */
export function evaluateAccurately(p: ArrayLike<number>, s: Complex): Complex {
  if (p.length === 0) return { re: 0, im: 0 }
  const out = new Float64Array(2)
  evaluateComplexCompensated(p, s.re, s.im, out)
  return { re: out[0]!, im: out[1]! }
}
