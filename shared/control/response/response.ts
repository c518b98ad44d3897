import type { Complex } from '../../numerics/complex'
import { scale } from '../../numerics/polynomial'
import { cascade } from './cascade'
import type { LoopFunctions } from '../controller'
import { chooseDuration } from './duration'
import { modalSum } from './modal-sum'
import type { Trajectory } from './trajectory'
import type { DesignSolution, ResponseInput, ResponseOptions, TransferFunction } from '../types'

/** Samples of a response where the caller names no number. */
const usualSamples = 400

/** Largest size of a sample: growth beyond it is cut off, so that every sample is a number. */
const largestSample = 1e300

/** How often the input is integrated from an impulse: step 1, ramp 2. */
const integrations: Record<ResponseInput, number> = { 'reference-step': 1, 'reference-ramp': 2, 'disturbance-step': 1 }

/**
 * The exact response of a rational transfer function to a unit step (integrators 1) or a unit ramp (2) from rest: a sum of modes where they
 * are well separated, the exponential of a matrix where they are not.
 * @param poles the roots of the denominator
 */
export function respond(g: TransferFunction, poles: readonly Complex[], integrators: number): Trajectory {
  const transform = { ...g, poles, integrators }
  return modalSum(transform) ?? cascade(transform)
}

/** Output and controller output of the closed loop after one input of size 1. */
export interface LoopResponse {
  output: Trajectory
  effort: Trajectory
  /** With a limit on the controller output: the last instant at which it cut the output off (0: never; infinite: for ever). */
  limitedUntil?: number
  /** That limit, for an input of size 1. */
  bound?: number
}

/** The loop's answer to an input; the disturbance enters at the plant input. */
export function respondTo(input: ResponseInput, functions: LoopFunctions, poles: readonly Complex[]): LoopResponse {
  const { loop, reference, effort, disturbance, characteristic } = functions
  const [toOutput, toEffort] = input === 'disturbance-step'
    ? [disturbance, { numerator: scale(loop.numerator, -1), denominator: characteristic }]
    : [reference, effort]
  return { output: respond(toOutput, poles, integrations[input]), effort: respond(toEffort, poles, integrations[input]) }
}

/**
 * Equally spaced samples of a response from 0 to its duration, ends included; finite numbers even where the loop is unstable. An impulse in the
 * effort (a derivative acting on a step) is left out: the samples are the regular part.
 */
export function sampleResponse(response: LoopResponse, poles: readonly Complex[], options: ResponseOptions): DesignSolution['response'] {
  const { input = 'reference-step', amplitude = 1, samples = usualSamples } = options
  const duration = options.duration ?? chooseDuration(response.output, poles)
  const dt = duration / (samples - 1)
  const scaled = (values: number[]) => values.map(value => Math.max(-largestSample, Math.min(largestSample, amplitude * value)))
  const time = new Array<number>(samples)
  for (let k = 0; k < samples; k++) time[k] = k * dt
  time[samples - 1] = duration
  return {
    input,
    time,
    output: scaled(response.output.sample(dt, samples)),
    effort: scaled(response.effort.sample(dt, samples)),
    ...(response.limitedUntil === undefined ? {} : { limitedUntil: Number.isFinite(response.limitedUntil) ? response.limitedUntil : null }),
  }
}
