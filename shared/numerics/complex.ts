/** A complex number as it travels in JSON. Functions on it live beside it; none of them changes its arguments. */
export interface Complex {
  re: number
  im: number
}

export const zero: Complex = Object.freeze({ re: 0, im: 0 })
export const one: Complex = Object.freeze({ re: 1, im: 0 })

export function add(a: Complex, b: Complex): Complex {
  return { re: a.re + b.re, im: a.im + b.im }
}

export function subtract(a: Complex, b: Complex): Complex {
  return { re: a.re - b.re, im: a.im - b.im }
}

export function multiply(a: Complex, b: Complex): Complex {
  return { re: a.re * b.re - a.im * b.im, im: a.re * b.im + a.im * b.re }
}

/** a / b without needless overflow (R. L. Smith, "Algorithm 116: Complex division", 1962). Division by zero gives NaN or infinite parts. */
export function divide(a: Complex, b: Complex): Complex {
  if (Math.abs(b.re) >= Math.abs(b.im)) {
    const ratio = b.im / b.re
    const denominator = b.re + b.im * ratio
    return { re: (a.re + a.im * ratio) / denominator, im: (a.im - a.re * ratio) / denominator }
  }
  const ratio = b.re / b.im
  const denominator = b.re * ratio + b.im
  return { re: (a.re * ratio + a.im) / denominator, im: (a.im * ratio - a.re) / denominator }
}

export function reciprocal(a: Complex): Complex {
  return divide(one, a)
}

export function negate(a: Complex): Complex {
  return { re: -a.re, im: -a.im }
}

export function conjugate(a: Complex): Complex {
  return { re: a.re, im: -a.im }
}

/** A complex number times a real one. */
export function scale(a: Complex, factor: number): Complex {
  return { re: a.re * factor, im: a.im * factor }
}

/** Size |a|. */
export function abs(a: Complex): number {
  return Math.hypot(a.re, a.im)
}

/** Angle in radians, in (-pi, pi]. */
export function arg(a: Complex): number {
  // Adding zero turns -0 into +0, so that a negative real number has the angle +pi however its zero is signed.
  return Math.atan2(a.im + 0, a.re)
}

/** |a - b|. */
export function distance(a: Complex, b: Complex): number {
  return Math.hypot(a.re - b.re, a.im - b.im)
}

/** Principal square root (real part >= 0). */
export function sqrt(a: Complex): Complex {
  const size = abs(a)
  if (size === 0) return { re: 0, im: 0 }
  const larger = Math.sqrt((size + Math.abs(a.re)) / 2)
  const smaller = Math.abs(a.im) / (2 * larger)
  const sign = a.im < 0 ? -1 : 1
  return a.re >= 0 ? { re: larger, im: sign * smaller } : { re: smaller, im: sign * larger }
}

export function isFinite(a: Complex): boolean {
  return Number.isFinite(a.re) && Number.isFinite(a.im)
}
