import { findRoot } from '../numerics/find-root'

/**
 * A signal y(t) for t >= 0, known exactly: what remains for ever (a polynomial in t) plus a transient. Values at 0 are those just after 0;
 * impulses at 0 itself are left out.
 */
export interface Trajectory {
  /** Coefficients of what remains, ascending powers of t: [final value] for a step, [offset, slope] for a ramp. */
  remains: number[]
  /** Whether the transient dies out. */
  decays: boolean
  /** Whether y has an impulse at 0 (a derivative acting on a step). */
  impulsive: boolean
  transient(t: number): number
  /** d/dt of the transient. */
  slope(t: number): number
  /** A size which the transient does not exceed from t on; never rising. Infinite where it does not decay. */
  envelope(t: number): number
  /** The next instant of a walk that resolves everything still moving at t. */
  next(t: number): number
  /** The instant before t of such a walk; t > 0. */
  previous(t: number): number
  /** y at 0, dt, 2 dt, ... as finite numbers: growth beyond the range of numbers is cut off. */
  sample(dt: number, count: number): number[]
}

/** Largest size that a sample of a growing signal takes. */
export const largestSample = 1e300

/** What remains of the signal at t. */
export function remainder({ remains }: Trajectory, t: number): number {
  let value = 0
  for (let i = remains.length - 1; i >= 0; i--) value = value * t + remains[i]!
  return value
}

/** An extremum of the transient: when, and how large. */
export interface Extremum { time: number, value: number }

/**
 * The largest value of sign * transient that exceeds `floor`, refined on the exact expression; null where it stays below.
 * @param floor what counts as zero (> 0, or the walk would not end)
 */
export function highest(y: Trajectory, sign: 1 | -1, floor: number): Extremum | null {
  let best = { time: 0, value: Math.max(sign * y.transient(0), floor) }
  let a = 0
  let valueA = sign * y.transient(0)
  let slopeA = sign * y.slope(0)
  while (y.envelope(a) > best.value) {
    const b = y.next(a)
    const valueB = sign * y.transient(b)
    const slopeB = sign * y.slope(b)
    if (slopeA > 0 && slopeB <= 0 && valueA + slopeA * (b - a) > best.value) {
      const time = turning(y, a, b)
      const value = sign * y.transient(time)
      if (value > best.value) best = { time, value }
    }
    a = b
    valueA = valueB
    slopeA = slopeB
  }
  return best.value > floor ? best : null
}

/** The first instant at which sign * transient reaches a level (< 0, above which it ends); null where it never does. */
export function firstReaching(y: Trajectory, sign: 1 | -1, level: number): number | null {
  let a = 0
  let valueA = sign * y.transient(0)
  if (valueA >= level) return 0
  let slopeA = sign * y.slope(0)
  const gap = (t: number) => sign * y.transient(t) - level
  for (let b = y.next(a); Number.isFinite(b); b = y.next(a)) {
    const valueB = sign * y.transient(b)
    const slopeB = sign * y.slope(b)
    if (slopeA > 0 && slopeB < 0 && valueA + slopeA * (b - a) >= level) {
      const top = turning(y, a, b)
      if (gap(top) >= 0) return findRoot(gap, a, top)
    }
    if (valueB >= level) return findRoot(gap, a, b)
    a = b
    valueA = valueB
    slopeA = slopeB
  }
  return null
}

/** The last instant at which |transient| exceeds the band (> 0); 0 where it never does. */
export function lastOutside(y: Trajectory, band: number): number {
  let b = envelopeReaches(y, band)
  let valueB = y.transient(b)
  let slopeB = y.slope(b)
  const excess = (t: number) => Math.abs(y.transient(t)) - band
  while (b > 0) {
    const a = y.previous(b)
    const valueA = y.transient(a)
    const slopeA = y.slope(a)
    if (slopeA * slopeB < 0 && Math.max(Math.abs(valueA + slopeA * (b - a)), Math.abs(valueB - slopeB * (b - a))) > band) {
      const turn = turning(y, a, b)
      if (excess(turn) > 0 && excess(b) <= 0) return findRoot(excess, turn, b)
    }
    if (Math.abs(valueA) > band) return excess(b) < 0 ? findRoot(excess, a, b) : b
    b = a
    valueB = valueA
    slopeB = slopeA
  }
  return 0
}

/** The largest |y| of a signal that remains constant in the end, refined on the exact expression. */
export function largestSize(y: Trajectory): number {
  const final = y.remains[0] ?? 0
  let a = 0
  let valueA = final + y.transient(0)
  let slopeA = y.slope(0)
  let best = Math.max(Math.abs(final), Math.abs(valueA))
  while (y.envelope(a) + Math.abs(final) > best * (1 + 1e-12)) {
    const b = y.next(a)
    const valueB = final + y.transient(b)
    const slopeB = y.slope(b)
    if (slopeA * slopeB < 0 && Math.abs(valueA + slopeA * (b - a)) > best) best = Math.max(best, Math.abs(final + y.transient(turning(y, a, b))))
    best = Math.max(best, Math.abs(valueB))
    a = b
    valueA = valueB
    slopeA = slopeB
  }
  return best
}

function turning(y: Trajectory, a: number, b: number): number {
  return findRoot(t => y.slope(t), a, b)
}

/** An instant from which the envelope stays within the band, found to a percent from above. */
function envelopeReaches(y: Trajectory, band: number): number {
  if (y.envelope(0) <= band) return 0
  let low = 0
  let high = y.next(0)
  while (y.envelope(high) > band) {
    low = high
    high *= 2
  }
  while (high - low > 0.01 * high) {
    const middle = (low + high) / 2
    if (y.envelope(middle) > band) low = middle
    else high = middle
  }
  return high
}
