import type { Complex } from '../../numerics/complex'
import { evaluateComplexCompensated } from '../../numerics/compensated'
import { degree, derivative, evaluateComplex, leading, rootsAtOrigin, type Polynomial } from '../../numerics/polynomial'
import { diesOut } from '../stability'
import { freshStart, ModalWalk, type Modes } from './modal-walk'
import { polynomialAt, type Trajectory } from './trajectory'

/** A Laplace transform N(s) / (D(s) s^integrators) of which the roots of D are known. */
export interface Transform {
  numerator: Polynomial
  denominator: Polynomial
  /** Roots of the denominator, conjugates exact. */
  poles: readonly Complex[]
  integrators: number
}

const unitRoundoff = 2 ** -53
/** Error of the sum, as a share of the signal, that is let pass. */
const tolerance = 1e-11
/** Exponents are cut here, so that a growing mode times its weight stays a number. */
const largestExponent = 600

/** How many powers of s, net of zeros at the origin, divide the transform: its poles at the origin. Negative: zeros remain there. */
export function polesAtOrigin({ numerator, denominator, integrators }: Transform): number {
  return rootsAtOrigin(denominator) + integrators - rootsAtOrigin(numerator)
}

/** Whether the inverse transform has an impulse (or worse) at t = 0. */
export function isImpulsive({ numerator, denominator, integrators }: Transform): boolean {
  return degree(numerator) >= degree(denominator) + integrators
}

/** The polynomial that the poles at the origin leave, ascending powers of t: a power series of N/D with those poles and zeros stripped. */
export function remainingPolynomial(transform: Transform): number[] {
  const count = polesAtOrigin(transform)
  if (count <= 0) return [0]
  const ascending = (p: Polynomial) => [...p].reverse().slice(rootsAtOrigin(p))
  const n = ascending(transform.numerator)
  const d = ascending(transform.denominator)
  const series: number[] = []
  for (let k = 0; k < count; k++) {
    let value = n[k] ?? 0
    for (let i = 1; i <= k; i++) value -= (d[i] ?? 0) * series[k - i]!
    series.push(value / d[0]!)
  }
  let factorial = 1
  return series.reverse().map((value, power) => {
    if (power > 0) factorial *= power
    return value / factorial
  })
}

/**
 * The inverse transform as a sum of modes (partial fractions over simple poles).
 * @returns null where poles lie so close together that the sum would cancel, or are not known well enough for it: the matrix exponential
 *   serves then, which forgives both.
 */
export function modalSum(transform: Transform): Trajectory | null {
  const remains = remainingPolynomial(transform)
  const { modes, error } = residues(transform)
  const reference = signalSize(modes, remains)
  if (!(error + startError(transform, modes, remains) <= tolerance * reference)) return null
  return sumOfModes(modes, remains, isImpulsive(transform), reference)
}

/** How far the sum misses y(0+), which the leading coefficients tell: what the poles' own errors do, where those are larger than rounding. */
function startError(transform: Transform, modes: Modes, remains: number[]): number {
  const { numerator, denominator, integrators } = transform
  const lag = degree(denominator) + integrators - degree(numerator)
  if (lag <= 0) return 0
  const start = lag === 1 ? leading(numerator) / leading(denominator) : 0
  return Math.abs(modes.re.reduce((sum, weight) => sum + weight, remains[0]!) - start)
}

/** Residues N(p) / (D'(p) p^integrators), with D'(p) as the product of distances; `error` bounds the rounding of their sum at any time. */
function residues(transform: Transform): { modes: Modes, error: number } {
  const poles = transform.poles.filter(pole => pole.re !== 0 || pole.im !== 0)
  const upper = poles.filter(pole => pole.im >= 0)
  const modes: Modes = {
    sigma: new Float64Array(upper.length), omega: new Float64Array(upper.length), re: new Float64Array(upper.length), im: new Float64Array(upper.length),
  }
  const numerator = [...transform.numerator].slice(0, transform.numerator.length - rootsAtOrigin(transform.numerator))
  const slope = derivative(numerator)
  const power = -polesAtOrigin(transform)
  const lead = leading(transform.denominator)
  const value = new Float64Array(2)
  let error = 0
  upper.forEach((pole, i) => {
    evaluateComplexCompensated(numerator, pole.re, pole.im, value)
    let weight: Complex = { re: value[0]! / lead, im: value[1]! / lead }
    const size = Math.hypot(pole.re, pole.im)
    const shift = evaluateComplex(slope, pole)
    // What the last digit of the pole's place does to N(p), relative to N(p) once the same divisions have been made.
    let movement = size * Math.hypot(shift.re, shift.im) / Math.abs(lead)
    let closeness = 4
    const divideBy = (re: number, im: number) => {
      const square = re * re + im * im
      weight = { re: (weight.re * re + weight.im * im) / square, im: (weight.im * re - weight.re * im) / square }
      movement /= Math.sqrt(square)
    }
    for (const other of poles) {
      if (other === pole) continue
      divideBy(pole.re - other.re, pole.im - other.im)
      closeness += size / Math.hypot(pole.re - other.re, pole.im - other.im)
    }
    for (let k = power; k < 0; k++) divideBy(pole.re, pole.im)
    for (let k = 0; k < power; k++) {
      weight = { re: weight.re * pole.re - weight.im * pole.im, im: weight.re * pole.im + weight.im * pole.re }
      movement *= size
    }
    const times = pole.im > 0 ? 2 : 1
    modes.sigma[i] = pole.re
    modes.omega[i] = pole.im
    modes.re[i] = times * weight.re
    modes.im[i] = times * weight.im
    if (pole.re < 0) closeness += Math.min(size / -pole.re, 1e4)
    error += times * unitRoundoff * (Math.hypot(weight.re, weight.im) * closeness + movement)
  })
  return { modes, error }
}

/** A size of the signal while it moves: the largest of a few values at the time scales of its modes. */
export function signalSize(modes: Modes, remains: number[]): number {
  let largest = Math.abs(remains[0]!)
  for (let i = 0; i < modes.sigma.length; i++) {
    const t = 1 / Math.hypot(modes.sigma[i]!, modes.omega[i]!)
    largest = Math.max(largest, Math.abs(sumAt(modes, t) + polynomialAt(remains, t)))
  }
  return largest
}

function sumAt({ sigma, omega, re, im }: Modes, t: number): number {
  let sum = 0
  for (let i = 0; i < sigma.length; i++) {
    const size = Math.exp(Math.min(sigma[i]! * t, largestExponent))
    sum += omega[i] === 0 ? re[i]! * size : size * (re[i]! * Math.cos(omega[i]! * t) - im[i]! * Math.sin(omega[i]! * t))
  }
  return sum
}

/** A sum of modes beside what remains, as a signal. */
export function sumOfModes(modes: Modes, remains: number[], impulsive: boolean, reference: number): Trajectory {
  const { sigma, omega, re, im } = modes
  const decays = sigma.every((re, i) => diesOut({ re, im: omega[i]! }))
  const speeds: Modes = {
    sigma, omega, re: sigma.map((rate, i) => re[i]! * rate - im[i]! * omega[i]!), im: sigma.map((rate, i) => re[i]! * omega[i]! + im[i]! * rate),
  }
  const walk = new ModalWalk(modes, reference)
  return {
    remains,
    decays,
    impulsive,
    transient: t => sumAt(modes, t),
    slope: t => sumAt(speeds, t),
    envelope: t => sigma.reduce((bound, rate, i) => bound + Math.hypot(re[i]!, im[i]!) * Math.exp(rate * t), 0),
    instant: k => walk.instant(k),
    previous: t => Math.max(0, t - walk.step(Math.max(0, t - walk.step(t)))),
    sample: (dt, samples) => sampleModes(modes, remains, dt, samples),
  }
}

/** Equal steps turn each mode by the same factor: two multiplications instead of three transcendental functions. */
function sampleModes({ sigma, omega, re, im }: Modes, remains: number[], dt: number, samples: number): number[] {
  const output = new Array<number>(samples)
  for (let k = 0; k < samples; k++) output[k] = polynomialAt(remains, k * dt)
  for (let i = 0; i < sigma.length; i++) {
    const step = Math.exp(Math.min(sigma[i]! * dt, largestExponent))
    const turnRe = step * Math.cos(omega[i]! * dt)
    const turnIm = step * Math.sin(omega[i]! * dt)
    const interval = sigma[i]! > 0 ? 1 : freshStart
    let x = 0
    let y = 0
    for (let k = 0; k < samples; k++) {
      if (k % interval === 0) {
        const t = k * dt
        const size = Math.exp(Math.min(sigma[i]! * t, largestExponent))
        const cos = Math.cos(omega[i]! * t)
        const sin = Math.sin(omega[i]! * t)
        x = size * (re[i]! * cos - im[i]! * sin)
        y = size * (re[i]! * sin + im[i]! * cos)
      }
      else {
        const turned = x * turnRe - y * turnIm
        y = x * turnIm + y * turnRe
        x = turned
      }
      output[k]! += x
    }
  }
  return output
}
