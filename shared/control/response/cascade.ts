import type { Complex } from '../../numerics/complex'
import { applyMatrix, matrixExponential } from '../../numerics/matrix-exponential'
import { rootsAtOrigin, type Polynomial } from '../../numerics/polynomial'
import { isImpulsive, polesAtOrigin, remainingPolynomial, type Transform } from './modal-sum'
import { diesOut } from '../stability'
import { realise, sectionsOf, type Section } from './state-space'
import { instantsPerLength, polynomialAt, type Instant, type Trajectory } from './trajectory'

/**
 * The inverse transform by the exponential of a matrix: the poles as a chain of first- and second-order sections, driven by an impulse. Repeated
 * and nearly repeated poles need no special care here; the entries of the exponential are divided differences of e^(pt) over the poles
 * (G. Opitz, "Steigungsmatrizen", 1964), which do not cancel.
 */

interface Realisation {
  /** n*n entries, row after row. */
  matrix: Float64Array
  start: Float64Array
  output: Float64Array
}

/** Turn of the fastest living pole during one step of the table, radians. */
const stepAngle = 0.4
const frozen = 1e250

/**
 * The inverse transform as a signal, whatever its poles: the answer of N/D to a unit step for one integrator, to a unit ramp for two.
 * One that grows can be evaluated and sampled, but not walked (`instant`, `previous`).
 */
export function cascade(transform: Transform): Trajectory {
  const system = realiseTransform(transform)
  const remains = remainingPolynomial(transform)
  const decays = transform.poles.every(pole => diesOut(pole) || (pole.re === 0 && pole.im === 0))
  const steady = (t: number) => polynomialAt(remains, t)
  const outputSlope = applyTransposed(system.matrix, system.output)
  const remainsSlope = remains.slice(1).map((coefficient, i) => (i + 1) * coefficient)
  const steadySlope = (t: number) => polynomialAt(remainsSlope, t)
  const transientOf = (state: Float64Array, t: number) => dot(system.output, state) - steady(t)
  const slopeOf = (state: Float64Array, t: number) => dot(outputSlope, state) - steadySlope(t)
  const table = decays ? new Table(system, transform.poles, transientOf, slopeOf) : null
  const stateAt = (t: number) => table?.stateAt(t) ?? applyMatrix(scaledExponential(system.matrix, t), system.start)
  return {
    remains,
    decays,
    impulsive: isImpulsive(transform),
    transient: t => transientOf(stateAt(t), t),
    slope: t => slopeOf(stateAt(t), t),
    envelope: t => table?.envelope(t) ?? Infinity,
    instant: k => table!.instant(k),
    previous: t => table!.previous(t),
    sample(dt, count) {
      // Beyond the table only the remainder is left; short of it the state is carried on from step to step.
      const moving = table ? Math.min(count, Math.ceil(table.end / dt) + 1) : count
      const samples = sampleStates(system, dt, moving)
      while (samples.length < count) samples.push(steady(samples.length * dt))
      return samples
    },
  }
}

/** States on a grid whose step doubles as the fast poles die out. */
class Table {
  private readonly times: number[] = [0]
  private readonly states: Float64Array[]
  /** From here on the transient has died out. */
  readonly end: number
  /** Largest |transient| from each instant on. */
  private readonly suffix: Float64Array

  constructor(
    private readonly system: Realisation,
    poles: readonly Complex[],
    private readonly transientOf: (state: Float64Array, t: number) => number,
    private readonly slopeOf: (state: Float64Array, t: number) => number,
  ) {
    const moving = poles.filter(pole => pole.re < 0)
    // A pole of multiplicity m decays as t^m e^(re t): allow for the power.
    const life = (pole: Complex) => (36 + 4 * moving.length) / -pole.re
    this.end = Math.max(0, ...moving.map(life))
    this.states = [system.start]
    let exponent = NaN
    let propagator: Float64Array | null = null
    let stepsLeft = instantsPerLength
    for (let t = 0; t < this.end;) {
      const fastest = Math.max(...moving.filter(pole => t < life(pole)).map(pole => Math.hypot(pole.re, pole.im)))
      let wanted = Math.floor(Math.log2(stepAngle / fastest))
      if (stepsLeft === 0) wanted = exponent + 1
      if (!(wanted <= exponent)) {
        exponent = wanted
        propagator = scaledExponential(system.matrix, 2 ** exponent)
        stepsLeft = instantsPerLength
      }
      t += 2 ** exponent
      stepsLeft--
      this.times.push(t)
      this.states.push(applyMatrix(propagator!, this.states[this.states.length - 1]!))
    }
    this.suffix = new Float64Array(this.times.length)
    for (let k = this.times.length - 1, largest = 0; k >= 0; k--) {
      largest = Math.max(largest, Math.abs(transientOf(this.states[k]!, this.times[k]!)))
      this.suffix[k] = largest
    }
  }

  stateAt(t: number): Float64Array {
    const k = this.indexAt(t)
    const rest = t - this.times[k]!
    return rest === 0 ? this.states[k]! : applyMatrix(scaledExponential(this.system.matrix, rest), this.states[k]!)
  }

  /** Between two instants of the grid the signal passes the larger of them by far less than a tenth. */
  envelope(t: number): number {
    const k = this.indexAt(t)
    return k === this.times.length - 1 ? 0 : 1.1 * this.suffix[k]!
  }

  instant(k: number): Instant | null {
    const time = this.times[k]
    const state = this.states[k]
    if (time === undefined || state === undefined) return null
    return { time, value: this.transientOf(state, time), slope: this.slopeOf(state, time), envelope: 1.1 * this.suffix[k]! }
  }

  previous(t: number): number {
    const k = this.indexAt(t)
    return this.times[this.times[k] === t ? Math.max(0, k - 1) : k]!
  }

  private indexAt(t: number): number {
    let low = 0
    let high = this.times.length
    while (high - low > 1) {
      const middle = (low + high) >> 1
      if (this.times[middle]! <= t) low = middle
      else high = middle
    }
    return low
  }
}

function realiseTransform(transform: Transform): Realisation {
  const { sections, numerator, denominator } = chain(transform)
  const { matrix, input, outputOf } = realise(sections, denominator)
  return { matrix, start: input, output: outputOf(numerator) }
}

/** Sections for the poles with common roots at the origin taken out, and numerator and denominator likewise. */
function chain(transform: Transform): { sections: Section[], numerator: number[], denominator: number[] } {
  const atOrigin = polesAtOrigin(transform)
  const moving = transform.poles.filter(pole => pole.re !== 0 || pole.im !== 0)
  const resting = Array.from({ length: Math.max(0, atOrigin) }, () => ({ re: 0, im: 0 }))
  const withZeros = (p: Polynomial, zeros: number) => [...p.slice(0, p.length - rootsAtOrigin(p)), ...new Array<number>(Math.max(0, zeros)).fill(0)]
  return {
    sections: sectionsOf([...moving, ...resting]),
    numerator: withZeros(transform.numerator, -atOrigin),
    denominator: withZeros(transform.denominator, atOrigin),
  }
}

function scaledExponential(matrix: Float64Array, t: number): Float64Array {
  return matrixExponential(matrix.map(entry => entry * t), Math.round(Math.sqrt(matrix.length)))
}

function sampleStates(system: Realisation, dt: number, count: number): number[] {
  const propagator = scaledExponential(system.matrix, dt)
  let state = system.start
  let value = 0
  return Array.from({ length: count }, (_, k) => {
    if (k > 0 && Math.abs(value) < frozen) state = applyMatrix(propagator, state)
    const next = dot(system.output, state)
    if (Number.isFinite(next)) value = next
    return value
  })
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0
  for (let i = 0; i < a.length; i++) sum += a[i]! * b[i]!
  return sum
}

function applyTransposed(matrix: Float64Array, row: Float64Array): Float64Array {
  const n = row.length
  const result = new Float64Array(n)
  for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) result[j]! += row[i]! * matrix[i * n + j]!
  return result
}
