import type { Complex } from './complex'

/**
 * Polynomials are arrays of real coefficients in descending powers: [1, 3, 2] is s^2 + 3 s + 2. The empty array and arrays of zeros
 * are the zero polynomial. No function changes its arguments.
 */
export type Polynomial = readonly number[]

/** The same polynomial without leading zeros; [0] for the zero polynomial. */
export function trim(p: Polynomial): number[] {
  const first = p.findIndex(coefficient => coefficient !== 0)
  return first < 0 ? [0] : p.slice(first)
}

export function isZero(p: Polynomial): boolean {
  return p.every(coefficient => coefficient === 0)
}

/** Degree, leading zeros not counted; -1 for the zero polynomial. */
export function degree(p: Polynomial): number {
  const first = p.findIndex(coefficient => coefficient !== 0)
  return first < 0 ? -1 : p.length - 1 - first
}

/** How many roots lie exactly at the origin (trailing zero coefficients); 0 for the zero polynomial. */
export function rootsAtOrigin(p: Polynomial): number {
  if (isZero(p)) return 0
  let count = 0
  while (p[p.length - 1 - count] === 0) count++
  return count
}

/** The coefficient of the highest power that is not zero; 0 for the zero polynomial. */
export function leading(p: Polynomial): number {
  return p.find(coefficient => coefficient !== 0) ?? 0
}

/** The coefficient of a power; 0 where the polynomial has none. */
export function coefficientOf(p: Polynomial, power: number): number {
  return p[p.length - 1 - power] ?? 0
}

/** p(x) for a real x (Horner). */
export function evaluate(p: Polynomial, x: number): number {
  let value = 0
  for (const coefficient of p) value = value * x + coefficient
  return value
}

/** p(s) for a complex s (Horner). */
export function evaluateComplex(p: Polynomial, s: Complex): Complex {
  let re = 0
  let im = 0
  for (const coefficient of p) {
    const next = re * s.re - im * s.im + coefficient
    im = re * s.im + im * s.re
    re = next
  }
  return { re, im }
}

/** Sum |a_k| |s|^k: the size against which rounding errors of p(s) are to be judged. */
export function evaluateSize(p: Polynomial, size: number): number {
  let value = 0
  for (const coefficient of p) value = value * size + Math.abs(coefficient)
  return value
}

/** a p + b q, leading zeros removed. */
export function combine(a: number, p: Polynomial, b: number, q: Polynomial): number[] {
  const length = Math.max(p.length, q.length)
  const sum = new Array<number>(length).fill(0)
  for (let i = 0; i < p.length; i++) sum[length - p.length + i]! += a * p[i]!
  for (let i = 0; i < q.length; i++) sum[length - q.length + i]! += b * q[i]!
  return trim(sum)
}

export function add(p: Polynomial, q: Polynomial): number[] {
  return combine(1, p, 1, q)
}

export function subtract(p: Polynomial, q: Polynomial): number[] {
  return combine(1, p, -1, q)
}

export function multiply(p: Polynomial, q: Polynomial): number[] {
  if (isZero(p) || isZero(q)) return [0]
  const product = new Array<number>(p.length + q.length - 1).fill(0)
  for (let i = 0; i < p.length; i++) {
    for (let j = 0; j < q.length; j++) product[i + j]! += p[i]! * q[j]!
  }
  return trim(product)
}

/**
 * a b - c d, with coefficients that are nothing but rounding made exactly 0: leading ones would otherwise come back as roots far out that
 * do not exist.
 */
export function productDifference(a: Polynomial, b: Polynomial, c: Polynomial, d: Polynomial): number[] {
  const length = Math.max(a.length + b.length, c.length + d.length) - 1
  const sum = new Array<number>(length).fill(0)
  const size = new Array<number>(length).fill(0)
  const accumulate = (p: Polynomial, q: Polynomial, sign: number) => {
    const offset = length - (p.length + q.length - 1)
    p.forEach((x, i) => q.forEach((y, j) => {
      sum[offset + i + j]! += sign * x * y
      size[offset + i + j]! += Math.abs(x * y)
    }))
  }
  accumulate(a, b, 1)
  accumulate(c, d, -1)
  const noise = 4 * length * 2 ** -53
  return trim(sum.map((value, i) => Math.abs(value) <= noise * size[i]! ? 0 : value))
}

/** p times a real number. */
export function scale(p: Polynomial, factor: number): number[] {
  return trim(p.map(coefficient => coefficient * factor))
}

/** p s^n for a whole n >= 0. */
export function multiplyByPower(p: Polynomial, n: number): number[] {
  return trim([...p, ...new Array<number>(n).fill(0)])
}

/** dp/ds. */
export function derivative(p: Polynomial): number[] {
  const n = p.length - 1
  return trim(p.slice(0, -1).map((coefficient, i) => coefficient * (n - i)))
}

/**
 * gain (s - z1)(s - z2)... with real coefficients.
 * @param roots conjugates given explicitly, in any order; a root whose conjugate is missing is a RangeError.
 */
export function fromRoots(roots: readonly Complex[], gain = 1): number[] {
  let product: number[] = [gain]
  const lower = roots.filter(root => root.im < 0)
  for (const root of roots) {
    if (root.im === 0) product = multiply(product, [1, -root.re])
    if (root.im <= 0) continue
    const partner = lower.findIndex(other => other.re === root.re && other.im === -root.im)
    if (partner < 0) throw new RangeError(`the conjugate of ${root.re} + ${root.im}j is missing`)
    lower.splice(partner, 1)
    product = multiply(product, [1, -2 * root.re, root.re * root.re + root.im * root.im])
  }
  if (lower.length > 0) throw new RangeError(`the conjugate of ${lower[0]!.re} - ${-lower[0]!.im}j is missing`)
  return product
}

/**
 * p along the line s = r e^{j angle} through the origin, as two real polynomials in r with p(s) = re(r) + j im(r).
 * @param direction e^{j angle} (size 1)
 */
export function alongRay(p: Polynomial, direction: Complex): { re: number[], im: number[] } {
  const n = p.length - 1
  const re = new Array<number>(p.length).fill(0)
  const im = new Array<number>(p.length).fill(0)
  let power: Complex = { re: 1, im: 0 }
  // A part of e^{j k angle} that is rounding alone is 0: as a leading coefficient it would make a root far out.
  const clean = (part: number, k: number) => Math.abs(part) <= 4 * k * 2 ** -53 ? 0 : part
  for (let k = 0; k <= n; k++) {
    re[n - k] = p[n - k]! * clean(power.re, k)
    im[n - k] = p[n - k]! * clean(power.im, k)
    power = {
      re: power.re * direction.re - power.im * direction.im,
      im: power.re * direction.im + power.im * direction.re,
    }
  }
  return { re: trim(re), im: trim(im) }
}

/** Sum of all roots, from the two leading coefficients; 0 for a constant. */
export function sumOfRoots(p: Polynomial): number {
  const [first = 1, second = 0] = trim(p)
  return -second / first
}
