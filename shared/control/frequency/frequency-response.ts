import { abs, arg } from '../../numerics/complex'
import { findMaximum } from '../../numerics/find-maximum'
import * as polynomial from '../../numerics/polynomial'
import { toDegrees, wrapAngle } from '../angle'
import type { ClosedLoop } from '../closed-loop'
import { NoAnswerError } from '../errors'
import { cancelCommon, cancellationWidth, factor, type FactoredLoop } from '../locus/factored-loop'
import type { FrequencyResponse } from '../types'
import { sampleFrequencies, usualRange, type FrequencyRange } from './sample-frequencies'

export interface FrequencyOptions {
  /** rad/s; where absent, half a decade to one and a half beyond the break frequencies, at whole decades. */
  from?: number
  to?: number
  /** Of the even grid; more points stand round lightly damped roots. */
  samples?: number
}

const usualSamples = 400
/** Beyond this, in either direction, a figure in dB is that of a pole or zero on the imaginary axis. */
const mostDb = 400
/** A root this close to the imaginary axis, against its size, lies on it as far as rounding lets it be told. */
const onAxis = 1e-12
/** A sensitivity beyond this belongs to a closed-loop root on the imaginary axis: there is no peak. */
const boundless = Math.log(1e12)
/** How much further than the grid, in either direction, the ends of the frequency axis are taken to lie. */
const farAway = 1e9

/** ln |L|, arg L in radians (unwrapped), ln |S| and ln |T| at one frequency. */
interface Sample { magnitude: number, phase: number, sensitivity: number, complementary: number }

/**
 * The loop on the imaginary axis: L(jw), S = 1/(1 + L) and T = L/(1 + L), the loop broken at the plant input.
 *
 * The phase is the sum of the angles of the poles and zeros, each followed continuously from w = 0, so that it is unwrapped by itself; it begins at
 * -90 degrees for each free integrator, 180 degrees lower where the gain at low frequency is negative. A root on the axis turns the phase as the limit
 * of one to the left of it does. S and T follow from ln |L| and arg L, whichever of L and 1/L is the smaller, so that nothing overflows. Figures in
 * dB end at +-400. Source: K. J. Astrom, R. M. Murray, "Feedback Systems", chapters on frequency domain analysis and design.
 *
 * A dead time turns the phase by -w T. Of a sampled loop they are those at z = e^(jw period), up to half the sampling rate, its phase followed from point to point.
 *
 * @param options.samples from 2 on; `from` < `to`, both positive
 * @throws NoAnswerError where the gains are zero, so that there is no loop, and where numbers leave their range
 */
export function frequencyResponse(closed: ClosedLoop, options: FrequencyOptions = {}): FrequencyResponse {
  const found = overFrequency(closed, options)
  if (Object.values(found).flat().every(figure => figure === null || Number.isFinite(figure))) return found
  throw new NoAnswerError('the numbers of this loop are too large or too small to draw it over frequency')
}

function overFrequency(closed: ClosedLoop, options: FrequencyOptions): FrequencyResponse {
  const { functions: { loop, deadTime }, highestFrequency } = closed
  if (polynomial.isZero(loop.numerator)) throw new NoAnswerError('the gains are zero: there is no loop to draw over frequency', 'gains')
  const factored = cancelCommon(factor({ ...loop, deadTime }), cancellationWidth).loop
  const places = [...factored.zeros, ...factored.poles, ...closed.poles.filter(pole => !isOfDelay(pole, deadTime))]
  const usual = rangeWithin(usualRange(places), deadTime, highestFrequency)
  const range = {
    from: options.from ?? Math.min(usual.from, (options.to ?? Infinity) / 10),
    to: Math.min(highestFrequency ?? Infinity, options.to ?? Math.max(usual.to, 10 * (options.from ?? 0))),
  }
  if (!(range.from < range.to)) throw new NoAnswerError('the frequencies asked for lie beyond half the sampling rate', 'from')
  const exact = sampler(factored, deadTime)
  const at = highestFrequency === undefined ? exact : pointwiseSampler(closed, exact)
  const frequency = sampleFrequencies(range, options.samples ?? usualSamples, places)
  const samples = highestFrequency === undefined ? frequency.map(at) : unwrapped(frequency.map(at))
  return {
    frequency,
    magnitudeDb: samples.map(({ magnitude }) => decibels(magnitude)),
    phaseDeg: samples.map(({ phase }) => toDegrees(phase)),
    sensitivityDb: samples.map(({ sensitivity }) => decibels(sensitivity)),
    complementaryDb: samples.map(({ complementary }) => decibels(complementary)),
    sensitivityPeakFrequency: peakFrequency(w => at(w).sensitivity, sampleFrequencies(usual, usualSamples, places)),
  }
}

/** Roots that the delay brings, and beyond which its phase turns without end. */
function isOfDelay({ re }: { re: number }, deadTime: number): boolean {
  return deadTime > 0 && re < -3 / deadTime
}

/** The usual range, but not far beyond one turn of the delay, nor beyond half the sampling rate. */
function rangeWithin({ from, to }: FrequencyRange, deadTime: number, highestFrequency = Infinity): FrequencyRange {
  const turned = deadTime > 0 ? 10 ** Math.ceil(Math.log10(2 * Math.PI / deadTime)) : Infinity
  const end = Math.min(Math.max(turned, 100 * from), to, highestFrequency)
  return { from: Math.min(from, end / 10), to: end }
}

/** The sampled loop, its phase within half a turn of the continuous one. */
function pointwiseSampler(closed: ClosedLoop, near: (w: number) => Sample): (w: number) => Sample {
  const { loop } = closed.pointwise!()
  return (w) => {
    const value = loop(w)
    const expected = near(w).phase
    const magnitude = Math.log(Math.max(abs(value), Number.MIN_VALUE))
    const phase = expected + wrapAngle(arg(value) - expected)
    return { magnitude, phase, ...parts(magnitude, phase) }
  }
}

/** Phases followed from the first one on: each within half a turn of the one before. */
function unwrapped(samples: Sample[]): Sample[] {
  let before = samples[0]!.phase
  return samples.map((sample) => {
    before += wrapAngle(sample.phase - before)
    return { ...sample, phase: before }
  })
}

function sampler(loop: FactoredLoop, deadTime: number): (w: number) => Sample {
  const start = startAngle(loop)
  return (w) => {
    let magnitude = Math.log(Math.abs(loop.gain))
    let phase = start - w * deadTime
    for (const { re, im } of loop.zeros) {
      magnitude += Math.log(Math.hypot(re, w - im))
      phase += angleGained(re, im, w)
    }
    for (const { re, im } of loop.poles) {
      magnitude -= Math.log(Math.hypot(re, w - im))
      phase -= angleGained(re, im, w)
    }
    return { magnitude, phase, ...parts(magnitude, phase) }
  }
}

/** arg L as w falls to 0: a quarter turn for each root at the origin, half a turn back where the rest is negative there. */
function startAngle({ numerator, denominator }: FactoredLoop): number {
  const [zeros, poles] = [polynomial.rootsAtOrigin(numerator), polynomial.rootsAtOrigin(denominator)]
  const isNegative = polynomial.coefficientOf(numerator, zeros) < 0 !== polynomial.coefficientOf(denominator, poles) < 0
  return (zeros - poles) * Math.PI / 2 - (isNegative ? Math.PI : 0)
}

/** By how much the factor jw - root has turned since w = 0, for a root beside its conjugate: the constant parts of the two cancel. */
function angleGained(re: number, im: number, w: number): number {
  if (re === 0 && im === 0) return 0
  const size = Math.hypot(re, im)
  const side = re > onAxis * size ? -1 : 1
  return side * Math.atan2(w - im, Math.abs(re) <= onAxis * size ? 0 : Math.abs(re))
}

/** ln |S| and ln |T|, through the smaller one of L and 1/L. */
function parts(magnitude: number, phase: number): Pick<Sample, 'sensitivity' | 'complementary'> {
  const size = Math.exp(-Math.abs(magnitude))
  const distance = Math.log(Math.hypot(1 + size * Math.cos(phase), size * Math.sin(phase)))
  return magnitude > 0
    ? { sensitivity: -magnitude - distance, complementary: -distance }
    : { sensitivity: -distance, complementary: magnitude - distance }
}

/** The frequency of the largest |S|; null where that is at 0, at infinity, or infinite. */
function peakFrequency(sensitivity: (w: number) => number, frequencies: readonly number[]): number | null {
  const sizes = frequencies.map(sensitivity)
  const best = sizes.reduce((most, size, i) => size > sizes[most]! ? i : most, 0)
  if (best === 0 || best === sizes.length - 1) return null
  const found = Math.exp(findMaximum(x => sensitivity(Math.exp(x)), Math.log(frequencies[best - 1]!), Math.log(frequencies[best + 1]!)))
  // On a root of the axis the sample itself is higher than any place near it.
  const size = Math.max(sensitivity(found), sizes[best]!)
  const atEnds = Math.max(sensitivity(frequencies[0]! / farAway), sensitivity(frequencies.at(-1)! * farAway))
  return size > atEnds && size < boundless ? found : null
}

function decibels(logarithm: number): number {
  return Math.min(mostDb, Math.max(-mostDb, logarithm * 20 / Math.LN10))
}
