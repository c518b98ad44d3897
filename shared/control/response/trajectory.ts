import { findRoot } from '../../numerics/find-root'

/**
 * Instants of a walk at one step length. A signal that needs more (a resonance all but undamped beside something slow) is walked in longer and
 * longer steps after that, so that no loop, however strange, takes long; its figures are then good to the envelope of that resonance.
 */
export const instantsPerLength = 2000

/**
 * Extrema that one search refines. A walk that resolves its signal meets fewer of them; once its steps have grown too long for that, nearly each of them
 * seems to hide one, and refining it tells no more than the instants do.
 */
const mostTurnings = 400

/** One instant of a walk along a transient. */
export interface Instant {
  time: number
  /** The transient and its derivative. */
  value: number
  slope: number
  /** A size which the transient does not exceed from here on. */
  envelope: number
}

/**
 * A signal y(t) for t >= 0, known exactly: what remains for ever (a polynomial in t) plus a transient. Values at 0 are those just after 0;
 * impulses at 0 itself are left out.
 */
export interface Trajectory {
  /** Coefficients of what remains, ascending powers of t: [final value] for a step, [offset, slope] for a ramp. */
  remains: number[]
  /** Whether the transient dies out; only then can it be walked. */
  decays: boolean
  /** Whether y has an impulse at 0 (a derivative acting on a step). */
  impulsive: boolean
  transient(t: number): number
  /** d/dt of the transient. */
  slope(t: number): number
  /** A size which the transient does not exceed from t on; never rising. */
  envelope(t: number): number
  /** The k-th instant, k = 0, 1, ..., of a walk from t = 0 that resolves everything still moving; null once the transient has died out. */
  instant(k: number): Instant | null
  /** The instant before t of such a walk backwards; t > 0. */
  previous(t: number): number
  /** y at 0, dt, 2 dt, ...; a growing signal stays short of the range of numbers. */
  sample(dt: number, count: number): number[]
}

/** A polynomial given by ascending powers of t, as `remains` is. */
export function polynomialAt(ascending: readonly number[], t: number): number {
  let value = 0
  for (let i = ascending.length - 1; i >= 0; i--) value = value * t + ascending[i]!
  return value
}

/** An extremum of the transient: when, and how large. */
export interface Extremum { time: number, value: number }

/**
 * The largest value of sign * transient that exceeds `floor`, refined on the exact expression; null where it stays below.
 * @param floor what counts as zero (> 0, or the walk would not end)
 */
export function highest(y: Trajectory, sign: 1 | -1, floor: number): Extremum | null {
  let a = y.instant(0)
  if (a === null) return null
  let best = { time: 0, value: Math.max(sign * a.value, floor) }
  let turnings = 0
  for (let k = 1; a !== null && a.envelope > best.value; k++) {
    const b = y.instant(k)
    if (b !== null && sign * a.slope > 0 && sign * b.slope <= 0 && sign * (a.value + a.slope * (b.time - a.time)) > best.value && turnings++ < mostTurnings) {
      const time = turning(y, a, b)
      const value = sign * y.transient(time)
      if (value > best.value) best = { time, value }
    }
    // A signal with corners or jumps may be highest where it does not turn.
    if (b !== null && sign * b.value > best.value) best = { time: b.time, value: sign * b.value }
    a = b
  }
  return best.value > floor ? best : null
}

/** The first instant at which sign * transient reaches a level; null where it never does. */
export function firstReaching(y: Trajectory, sign: 1 | -1, level: number): number | null {
  let a = y.instant(0)
  if (a === null || sign * a.value >= level) return 0
  const gap = (t: number) => sign * y.transient(t) - level
  for (let k = 1; a !== null; k++) {
    const b = y.instant(k)
    if (b === null) return null
    if (sign * a.slope > 0 && sign * b.slope < 0 && sign * (a.value + a.slope * (b.time - a.time)) >= level) {
      const top = turning(y, a, b)
      if (gap(top) >= 0) return crossing(gap, a.time, top)
    }
    if (sign * b.value >= level) return crossing(gap, a.time, b.time)
    a = b
  }
  return null
}

/** The largest |y| of a signal that remains constant in the end, refined on the exact expression. */
export function largestSize(y: Trajectory): number {
  const final = y.remains[0] ?? 0
  let a = y.instant(0)
  let best = Math.max(Math.abs(final), Math.abs(final + (a?.value ?? 0)))
  let turnings = 0
  for (let k = 1; a !== null && a.envelope + Math.abs(final) > best * (1 + 1e-12); k++) {
    const b = y.instant(k)
    if (b === null) break
    if (a.slope * b.slope < 0 && Math.abs(final + a.value + a.slope * (b.time - a.time)) > best && turnings++ < mostTurnings) {
      best = Math.max(best, Math.abs(final + y.transient(turning(y, a, b))))
    }
    best = Math.max(best, Math.abs(final + b.value))
    a = b
  }
  return best
}

/** The last instant at which |transient| exceeds the band (> 0); 0 where it never does. */
export function lastOutside(y: Trajectory, band: number): number {
  let b = envelopeReaches(y, band)
  let valueB = y.transient(b)
  let slopeB = y.slope(b)
  const excess = (t: number) => Math.abs(y.transient(t)) - band
  let turnings = 0
  for (let k = 0; b > 0; k++) {
    const a = Math.max(0, b - (b - y.previous(b)) * stretched(k))
    const valueA = y.transient(a)
    const slopeA = y.slope(a)
    if (slopeA * slopeB < 0 && Math.max(Math.abs(valueA + slopeA * (b - a)), Math.abs(valueB - slopeB * (b - a))) > band && turnings++ < mostTurnings) {
      const turn = crossing(t => y.slope(t), a, b)
      if (excess(turn) > 0 && excess(b) <= 0) return crossing(excess, turn, b)
    }
    if (Math.abs(valueA) > band) return excess(b) < 0 ? crossing(excess, a, b) : b
    b = a
    valueB = valueA
    slopeB = slopeA
  }
  return 0
}

/** How much longer than resolves the signal the k-th step backwards is: not at all at first, then growing fast, since nothing is seen on the way any more. */
function stretched(k: number): number {
  return k < instantsPerLength ? 1 : 2 ** Math.ceil(10 * (k + 1 - instantsPerLength) / instantsPerLength)
}

function turning(y: Trajectory, a: Instant, b: Instant): number {
  return crossing(t => y.slope(t), a.time, b.time)
}

/** Where f changes sign between a and b; b where it does so by a jump at an end, which f at the ends does not show. */
function crossing(f: (t: number) => number, a: number, b: number): number {
  return Math.sign(f(a)) * Math.sign(f(b)) === 1 ? b : findRoot(f, a, b)
}

/** An instant from which the envelope stays within the band, found to one step of a walk from above. */
function envelopeReaches(y: Trajectory, band: number): number {
  if (y.envelope(0) <= band) return 0
  let low = 0
  const step = y.instant(1)!.time
  let high = step
  while (y.envelope(high) > band && high < Number.MAX_VALUE / 2) {
    low = high
    high *= 2
  }
  while (high - low > Math.max(step, 1e-9 * high)) {
    const middle = (low + high) / 2
    if (y.envelope(middle) > band) low = middle
    else high = middle
  }
  return high
}
