import * as complex from '../../numerics/complex'
import type { Complex } from '../../numerics/complex'
import { evaluateAccurately } from '../../numerics/compensated'
import * as polynomial from '../../numerics/polynomial'
import type { LoopFunctions } from '../controller'
import { signalSize, sumOfModes } from '../response/modal-sum'
import type { Modes } from '../response/modal-walk'
import { trajectoryOf, type PiecewiseSignal } from '../response/piecewise'
import type { LoopResponse } from '../response/response'
import { refuseMoreWork, type Work } from '../response/work'
import { polynomialAt, type Trajectory } from '../response/trajectory'
import type { ResponseInput } from '../types'
import { DelaySimulation } from './delay-simulation'
import { delayedRemains } from './limits-at-rest'
import { delayFactor, evaluateQuasi, type QuasiPolynomial } from './quasi-polynomial'

/** Periods of the dead time that are followed step by step before the roots take over: by then those left out have died away. */
const periodsByStep = 10
/** Largest difference (share of the signal) between steps and roots, over the last periods that both know, with which the roots take over. */
const agreement = 1e-9
const periodsCompared = 3
const compared = periodsByStep - periodsCompared
/** Roots closer than this share of their size all but coincide. */
const closeness = 0.03
const circlePoints = 32
/** Share of what remains that no figure shows. */
const extinct = 1e-14
/** After so many time constants of the slowest root nothing moves. */
const lifetimes = 40
/** A signal of the loop as a transform: p(s) e^(-s T) (or without the delay) over q(s) s^integrations. */
interface Signal { numerator: number[], delayed: boolean }

/**
 * The exact response of a loop with dead time: by the method of steps at first; from ten dead times on as a sum over the roots of the quasi-polynomial, once
 * both agree. Where they do not (roots that all but coincide, a loop whose high frequencies pass), steps go on to the end.
 * @param poles roots near the origin
 * @throws TooMuchWorkError where the dead time is so short against the rest that the steps would not end
 */
export function delayedResponse(functions: LoopFunctions, input: ResponseInput, poles: readonly Complex[], stable: boolean, crossover: number, work: Work): LoopResponse {
  const simulation = new DelaySimulation(functions, input, crossover, work)
  if (!stable) return { output: growing(simulation, simulation.output), effort: growing(simulation, simulation.effort) }
  const integrations = input === 'reference-ramp' ? 2 : 1
  const { loop, reference, effort, disturbance, deadTime } = functions
  const q: QuasiPolynomial = { ...loop, deadTime }
  const signals: [Signal, Signal] = input === 'disturbance-step'
    ? [{ numerator: disturbance.numerator, delayed: false }, { numerator: polynomial.scale(loop.numerator, -1), delayed: true }]
    : [{ numerator: reference.numerator, delayed: true }, { numerator: effort.numerator, delayed: false }]
  const { output: outputRemains, effort: effortRemains } = delayedRemains(functions, input)
  const remains = [outputRemains, effortRemains]
  simulation.extendTo(periodsByStep * deadTime)
  const tails = signals.map((signal, i) => tailOf(signal, q, poles, integrations, remains[i]!))
  const taken = [simulation.output, simulation.effort].every((pieces, i) => agree(pieces, tails[i]!, deadTime))
  if (!taken) {
    const end = lifetimes / -Math.max(...poles.map(pole => pole.re))
    simulation.extendTo(end)
    if (simulation.time < end) refuseMoreWork('loop.deadTime')
  }
  const [output, controllerOutput] = [simulation.output, simulation.effort].map((pieces, i) =>
    trajectoryOf(pieces, { remains: remains[i]!, decays: true, tail: taken ? tails[i] : undefined }))
  return { output: output!, effort: { ...controllerOutput!, impulsive: simulation.impulsive } }
}

/** An unstable response: followed as far as it is asked for. */
function growing(simulation: DelaySimulation, pieces: PiecewiseSignal): Trajectory {
  simulation.extendTo(0)
  return {
    ...trajectoryOf(pieces, { remains: [0], decays: false, impulsive: simulation.impulsive }),
    sample(dt, count) {
      simulation.extendTo(dt * (count - 1) * (1 + 1e-12))
      return Array.from({ length: count }, (_, k) => pieces.at(k * dt))
    },
  }
}

/** The sum over the roots: residues of the transform, one by one, or about roots that all but coincide all at once. */
function tailOf({ numerator, delayed }: Signal, q: QuasiPolynomial, poles: readonly Complex[], integrations: number, remains: number[]): Trajectory {
  const transformAt = (s: Complex, below: Complex) => {
    let value = complex.divide(evaluateAccurately(numerator, s), below)
    if (delayed) value = complex.multiply(value, delayFactor(s, q.deadTime))
    for (let k = 0; k < integrations; k++) value = complex.divide(value, s)
    return value
  }
  const modes: { pole: Complex, weight: Complex }[] = []
  for (const { members, centre, radius } of clustersOf(poles)) {
    if (members === 1) modes.push({ pole: centre, weight: transformAt(centre, evaluateQuasi(q, centre).slope) })
    else for (const point of circle(centre, radius)) modes.push({ pole: point, weight: complex.scale(complex.multiply(transformAt(point, evaluateQuasi(q, point).value), complex.subtract(point, centre)), 1 / circlePoints) })
  }
  // Those of the delay's chain have died away where the sum takes over: they would only cost time.
  const living = modes.filter(({ pole, weight }) =>
    complex.abs(weight) * Math.exp(pole.re * compared * q.deadTime) > extinct * (Math.abs(remains[0]!) + Number.MIN_VALUE))
  const twice = ({ im }: Complex) => im > 0 ? 2 : 1
  const sum: Modes = {
    sigma: Float64Array.from(living, ({ pole }) => pole.re), omega: Float64Array.from(living, ({ pole }) => pole.im),
    re: Float64Array.from(living, ({ pole, weight }) => twice(pole) * weight.re), im: Float64Array.from(living, ({ pole, weight }) => pole.im > 0 ? 2 * weight.im : 0),
  }
  return sumOfModes(sum, remains, false, signalSize(sum, remains))
}

interface Cluster { members: number, centre: Complex, radius: number }

/** Upper roots, those closer than a small share of their size gathered; a pair close to the real axis counts as two that all but coincide. */
function clustersOf(poles: readonly Complex[]): Cluster[] {
  const rest = poles.filter(({ im }) => im >= 0)
  const clusters: Cluster[] = []
  for (let first = rest.shift(); first !== undefined; first = rest.shift()) {
    const reach = closeness * complex.abs(first)
    const near = rest.filter(other => complex.distance(other, first) <= reach)
    for (const other of near) rest.splice(rest.indexOf(other), 1)
    const all = [first, ...near]
    const real = all.some(({ im }) => im <= reach)
    const mean = complex.scale(all.reduce((sum, one) => complex.add(sum, one), complex.zero), 1 / all.length)
    const members = all.reduce((count, { im }) => count + (real && im > 0 ? 2 : 1), 0)
    clusters.push({ members, centre: members > 1 && real ? { re: mean.re, im: 0 } : members > 1 ? mean : first, radius: 2.5 * reach })
  }
  return clusters
}

/**
 * Points of a circle about a cluster. The residues within are the integral around it, which the trapezoidal rule over so few points gives to rounding while no other
 * root is near. About a real centre the upper half, whose mirror image is implied.
 */
function circle(centre: Complex, radius: number): Complex[] {
  const points = Array.from({ length: circlePoints }, (_, k) => {
    const angle = 2 * Math.PI * (k + 0.5) / circlePoints
    return { re: centre.re + radius * Math.cos(angle), im: centre.im + radius * Math.sin(angle) }
  })
  return centre.im === 0 ? points.slice(0, circlePoints / 2) : points
}

/** Whether the roots say what the steps say, over the last periods followed. */
function agree(pieces: PiecewiseSignal, tail: Trajectory, deadTime: number): boolean {
  let size = Math.abs(tail.remains[0]!)
  let off = 0
  pieces.starts.forEach((start, i) => {
    size = Math.max(size, Math.abs(pieces.values[i]![0]!))
    if (start < compared * deadTime * (1 - 1e-9)) return
    const middle = start + pieces.lengths[i]! / 2
    off = Math.max(off, Math.abs(pieces.at(middle) - polynomialAt(tail.remains, middle) - tail.transient(middle)))
  })
  return off <= agreement * size
}
