import type { Complex } from '../../numerics/complex'
import { leading, type Polynomial } from '../../numerics/polynomial'

/** One section of a chain: g/(s - p) for a real pole, w^2/(s^2 - 2 re s + w^2) for a pair; g = |p| or, at the origin, the pace of the others. */
export interface Section { pole: Complex, gain: number }

/** x' = A x + b u; the outputs are rows of weights on x. */
export interface StateSpace {
  /** n*n entries, row after row. */
  matrix: Float64Array
  /** b, which is also the state just after a unit impulse. */
  input: Float64Array
  /** The weights whose output is p/denominator; a part of p that the denominator divides (an impulse, or u itself) is dropped. */
  outputOf(p: Polynomial): Float64Array
}

/** Sections for poles as often as they occur, the fastest first; those at the origin come last. */
export function sectionsOf(poles: readonly Complex[]): Section[] {
  const upper = poles.filter(pole => pole.im > 0 || (pole.im === 0 && pole.re !== 0))
  const sizes = upper.map(pole => Math.hypot(pole.re, pole.im))
  const pace = sizes.length > 0 ? Math.min(...sizes) : 1
  const sections = upper.map((pole, i) => ({ pole, gain: sizes[i]! })).sort((a, b) => b.gain - a.gain)
  for (const pole of poles) if (pole.re === 0 && pole.im === 0) sections.push({ pole: { re: 0, im: 0 }, gain: pace })
  return sections
}

/**
 * A chain of first- and second-order sections with a given denominator. Repeated and nearly repeated poles need no special care in it.
 * @param sections none for a constant
 */
export function realise(sections: Section[], denominator: Polynomial): StateSpace {
  const n = sections.reduce((sum, section) => sum + (section.pole.im === 0 ? 1 : 2), 0)
  const matrix = new Float64Array(n * n)
  const input = new Float64Array(n)
  const first: number[] = []
  let row = 0
  sections.forEach(({ pole, gain }, i) => {
    first.push(row)
    const before = i === 0 ? -1 : first[i - 1]!
    const driven = pole.im === 0 ? row : row + 1
    if (pole.im === 0) matrix[row * n + row] = pole.re
    else {
      matrix[row * n + row + 1] = gain
      matrix[(row + 1) * n + row] = -gain
      matrix[(row + 1) * n + row + 1] = 2 * pole.re
    }
    if (before < 0) input[driven] = gain
    else matrix[driven * n + before] = gain
    row = driven + 1
  })
  // The sections multiply to the denominator only as well as its roots are known, which for a multiple root is poorly. What the product lacks, fed
  // back to the head of the chain, makes the denominator exact.
  const lead = leading(denominator)
  const outputOf = (p: Polynomial) => weights(sections, first, p.map(coefficient => coefficient / lead), n)
  const head = sections[0]?.pole.im === 0 ? 0 : 1
  outputOf(denominator).forEach((weight, j) => matrix[head * n + j]! -= sections[0]!.gain * weight)
  return { matrix, input, outputOf }
}

/**
 * Weights of the states that make p over the product of all sections: remainders of p's repeated division by the sections, the last one first. The
 * quotient left over (impulses, or the product itself) is dropped.
 */
function weights(sections: Section[], first: number[], p: Polynomial, n: number): Float64Array {
  const output = new Float64Array(n)
  let rest = p
  const gains: number[] = []
  sections.reduce((total, { pole, gain }, i) => gains[i] = total * (pole.im === 0 ? gain : gain * gain), 1)
  for (let i = sections.length - 1; i >= 0; i--) {
    const { pole, gain } = sections[i]!
    const row = first[i]!
    if (pole.im === 0) {
      const { quotient, remainder } = divideBy(rest, [-pole.re])
      output[row] = remainder[0]! / gains[i]!
      rest = quotient
    }
    else {
      const { quotient, remainder } = divideBy(rest, [-2 * pole.re, gain * gain])
      output[row] = remainder[1]! / gains[i]!
      output[row + 1] = remainder[0]! * gain / gains[i]!
      rest = quotient
    }
  }
  return output
}

/** Division by a monic polynomial given without its leading 1; the remainder has as many coefficients as `tail`. */
function divideBy(p: Polynomial, tail: readonly number[]): { quotient: number[], remainder: number[] } {
  const work = [...p]
  const quotientLength = Math.max(0, work.length - tail.length)
  for (let i = 0; i < quotientLength; i++) tail.forEach((coefficient, k) => work[i + 1 + k]! -= coefficient * work[i]!)
  const remainder = work.slice(quotientLength)
  return { quotient: work.slice(0, quotientLength), remainder: [...new Array<number>(tail.length - remainder.length).fill(0), ...remainder] }
}
