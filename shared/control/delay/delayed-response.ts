import * as complex from '../../numerics/complex'
import type { Complex } from '../../numerics/complex'
import { evaluateAccurately } from '../../numerics/compensated'
import * as polynomial from '../../numerics/polynomial'
import type { LoopFunctions } from '../controller'
import { NoAnswerError } from '../errors'
import { signalSize, sumOfModes } from '../response/modal-sum'
import type { Modes } from '../response/modal-walk'
import { trajectoryOf, type PiecewiseSignal } from '../response/piecewise'
import type { LoopResponse } from '../response/response'
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
 * @throws NoAnswerError where the dead time is so short against the rest that the steps would not end
 */
export function delayedResponse(functions: LoopFunctions, input: ResponseInput, poles: readonly Complex[], stable: boolean, crossover: number): LoopResponse {
  const simulation = new DelaySimulation(functions, input, crossover)
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
    if (simulation.time < end) throw new NoAnswerError('the dead time is too short against the rest of the loop to be followed to the end: leave it out', 'loop.deadTime')
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

/** The sum over the roots: residues of the transform at each. */
function tailOf({ numerator, delayed }: Signal, q: QuasiPolynomial, poles: readonly Complex[], integrations: number, remains: number[]): Trajectory {
  const modes: Modes = { sigma: new Float64Array(poles.length), omega: new Float64Array(poles.length), re: new Float64Array(poles.length), im: new Float64Array(poles.length) }
  let count = 0
  for (const pole of poles.filter(({ im }) => im >= 0)) {
    let weight = complex.divide(evaluateAccurately(numerator, pole), evaluateQuasi(q, pole).slope)
    if (delayed) weight = complex.multiply(weight, delayFactor(pole, q.deadTime))
    for (let k = 0; k < integrations; k++) weight = complex.divide(weight, pole)
    // Those of the delay's chain have died away where the sum takes over: they would only cost time.
    if (complex.abs(weight) * Math.exp(pole.re * compared * q.deadTime) <= extinct * (Math.abs(remains[0]!) + Number.MIN_VALUE)) continue
    const times = pole.im > 0 ? 2 : 1
    modes.sigma[count] = pole.re
    modes.omega[count] = pole.im
    modes.re[count] = times * weight.re
    modes.im[count] = pole.im > 0 ? times * weight.im : 0
    count += 1
  }
  const living: Modes = { sigma: modes.sigma.slice(0, count), omega: modes.omega.slice(0, count), re: modes.re.slice(0, count), im: modes.im.slice(0, count) }
  return sumOfModes(living, remains, false, signalSize(living, remains))
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
