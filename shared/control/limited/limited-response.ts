import type { ClosedLoop } from '../closed-loop'
import { NoAnswerError } from '../errors'
import { actingSpeed } from '../delay/delayed-loop'
import { DelaySimulation } from '../delay/delay-simulation'
import { delayedRemains } from '../delay/limits-at-rest'
import { trajectoryOf, type PiecewiseSignal } from '../response/piecewise'
import type { LoopResponse } from '../response/response'
import { refuseMoreWork, type Work } from '../response/work'
import { largestSize, type Trajectory } from '../response/trajectory'
import type { ResponseInput } from '../types'
import { SwitchingSimulation } from './switching-simulation'

/** After so many time constants of the slowest root, free of the limit, a figure no longer feels where it came from. */
const lifetimes = 25
/** A loop that the limit does not let come to rest is given up after so many lives of its slowest root. */
const mostLives = 8

/** Either way of following a loop with a limit. */
interface Simulation {
  output: PiecewiseSignal
  effort: PiecewiseSignal
  limitedUntil: number
  time: number
  exhausted: boolean
  extendTo(t: number): void
}

/**
 * The response with the controller output cut off at a limit. Where the loop stays within it, that is the linear response. The figures of a response that does not
 * come to rest (the limit is below what the end asks for, or the loop swings against it) do not exist.
 * @param limit bound on the size of the controller output, in its unit; the response is that to an input of size 1, so `amplitude` scales the limit
 */
export function limitedResponse(loop: ClosedLoop, input: ResponseInput, amplitude: number, limit: number, work: Work): LoopResponse {
  const bound = limit / Math.abs(amplitude)
  if (loop.stable) {
    const linear = linearOrNull(loop, input, amplitude)
    if (linear !== null && !linear.effort.impulsive && input !== 'reference-ramp' && largestSize(linear.effort) <= bound) return { ...linear, bound, limitedUntil: 0 }
  }
  const simulation: Simulation = loop.functions.deadTime > 0
    ? new DelaySimulation(loop.functions, input, actingSpeed(loop.functions, loop.poles), work, bound)
    : new SwitchingSimulation(loop.functions, loop.poles, input, work, bound)
  if (!loop.stable) return endless(simulation)
  const remains = delayedRemains(loop.functions, input)
  const life = lifetimes / -Math.max(...loop.poles.map(pole => pole.re))
  const reachable = input === 'reference-ramp' || Math.abs(remains.effort[0]!) < bound
  simulation.extendTo(life)
  while (reachable && !simulation.exhausted && simulation.time < Math.min(simulation.limitedUntil + life, mostLives * life)) simulation.extendTo(simulation.limitedUntil + life)
  if (simulation.exhausted) refuseMoreWork('loop.actuatorLimit')
  if (!reachable || simulation.time < simulation.limitedUntil + life) return endless(simulation)
  return {
    output: trajectoryOf(simulation.output, { remains: remains.output, decays: true }),
    effort: trajectoryOf(simulation.effort, { remains: remains.effort, decays: true }),
    bound,
    limitedUntil: simulation.limitedUntil,
  }
}

/** An impulse that comes back again and again has no linear response; the limit swallows it. */
function linearOrNull(loop: ClosedLoop, input: ResponseInput, amplitude: number): LoopResponse | null {
  try {
    return loop.respondTo(input, amplitude)
  }
  catch (error) {
    if (error instanceof NoAnswerError) return null
    throw error
  }
}

/** A response without end: followed as far as it is asked for, and held there once its allowance of work is spent. */
function endless(simulation: Simulation): LoopResponse {
  simulation.extendTo(simulation.time + Number.MIN_VALUE)
  const follow = (pieces: PiecewiseSignal): Trajectory => ({
    ...trajectoryOf(pieces, { remains: [0], decays: false }),
    sample(dt, count) {
      simulation.extendTo(dt * (count - 1) * (1 + 1e-12))
      return Array.from({ length: count }, (_, k) => pieces.at(k * dt))
    },
  })
  return { output: follow(simulation.output), effort: follow(simulation.effort), limitedUntil: Infinity }
}
