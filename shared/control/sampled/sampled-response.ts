import type { Complex } from '../../numerics/complex'
import { PiecewiseSignal, trajectoryOf } from '../response/piecewise'
import type { LoopResponse } from '../response/response'
import { nodesPerPiece, type StepPropagator } from '../response/step-propagator'
import { refuseMoreWork, weightOf, type Work } from '../response/work'
import type { Trajectory } from '../response/trajectory'
import type { ResponseInput } from '../types'
import { followCoarsely, lifeOf, quickLifeOf } from './coarse-tail'
import type { HeldPlant } from './held-plant'
import { periodMap } from './period-map'
import type { SampledController } from './sampled-controller'
import { control, flat, heldValues, linearPeriod, pushed, readAt, restingState, type SampledState } from './sampled-step'

/** Pieces that are followed between the samples too, after the start and after the limit was left. */
const finePieces = 8000
/** A loop that its limit does not let come to rest is given up after so many lives of its slowest root. */
const mostLives = 8

export interface SampledRun {
  held: HeldPlant
  controller: SampledController
  period: number
  input: ResponseInput
  /** Bound on the size of the controller output; infinite for none. */
  limit: number
  work: Work
}

/**
 * The sampled loop followed period by period, with what the plant does between the samples: exact, since the plant's input is constant in each part of a period.
 */
class SampledSimulation {
  readonly output = new PiecewiseSignal()
  readonly effort = new PiecewiseSignal()
  /** The last instant at which the limit held the controller back. */
  limitedUntil = 0
  private state: SampledState
  private sample = 0

  constructor(private readonly run: SampledRun) {
    this.state = restingState(run.held, run.controller)
  }

  /** Pieces that a period counts. */
  private get cost(): number {
    const { older, newer, order } = this.run.held
    return (older.length + newer.length) * weightOf(order)
  }

  get time(): number {
    return this.sample * this.run.period
  }

  get exhausted(): boolean {
    return this.run.work.pieces < this.cost
  }

  extendTo(t: number): void {
    while (this.time < t && !this.exhausted) this.followPeriod()
  }

  /** Follows the rest, in which only slow roots move, in longer strides; false, with nothing done, where it would pass the limit. */
  finish(poles: readonly Complex[], until: number): boolean {
    const { held, controller, period, input, limit } = this.run
    const inputs = { reference: input === 'reference-step' ? 1 : 0, disturbance: input === 'disturbance-step' ? 1 : 0 }
    const { next, u } = linearPeriod(held, controller, restingState(held, controller), inputs)
    const driven = { state: flat(next), effort: u }
    const rest = { output: new PiecewiseSignal(), effort: new PiecewiseSignal() }
    followCoarsely({ map: periodMap(held, controller), driven, period, poles, since: this.limitedUntil, work: this.run.work }, rest, flat(this.state), this.time, until)
    if (rest.effort.values.some(values => values.some(value => Math.abs(value) > limit * (1 + 1e-9)))) return false
    this.output.append(rest.output)
    this.effort.append(rest.effort)
    return true
  }

  private followPeriod(): void {
    const { held, controller, period, input, limit } = this.run
    this.run.work.pieces -= this.cost
    const { y, m } = readAt(held, this.state)
    const reference = input === 'reference-ramp' ? this.time : input === 'reference-step' ? 1 : 0
    const disturbance = input === 'disturbance-step' ? 1 : 0
    const { u: wanted, next } = control(controller, this.state.controller, reference - m, y)
    const u = Math.max(-limit, Math.min(limit, wanted))
    if (u !== wanted) this.limitedUntil = this.time + period
    const { older, newer } = heldValues(this.state.sent, u)
    let plant = this.state.plant
    let start = this.time
    const follow = (steps: readonly StepPropagator[], value: number) => {
      for (const step of steps) {
        this.output.add(start, step.length, step.valuesHeld(0, plant, value + disturbance))
        plant = step.endHeld(plant, value + disturbance)
        start += step.length
      }
    }
    this.effort.add(this.time, period, new Float64Array(nodesPerPiece).fill(u))
    follow(held.older, older)
    follow(held.newer, newer)
    this.state = { plant, controller: next, sent: pushed(this.state.sent, u) }
    this.sample += 1
  }
}

/**
 * Output, with what it does between the samples, and held controller output after a unit input.
 * @param remains what output and effort tend to, ascending powers of t; null in an unstable loop
 * @throws TooMuchWorkError where the period is so short against the loop that its end is not reached
 */
export function sampledResponse(run: SampledRun, remains: { output: number[], effort: number[] } | null, poles: readonly Complex[]): LoopResponse {
  const simulation = new SampledSimulation(run)
  if (remains === null) return { output: growing(simulation, simulation.output), effort: growing(simulation, simulation.effort) }
  const life = Math.max(0, ...poles.map(lifeOf))
  // A ramp never comes to rest: it is followed sample by sample for as long as it moves.
  const coarse = run.input !== 'reference-ramp'
  const wanted = (coarse ? Math.max(0, ...poles.map(pole => quickLifeOf(pole, run.period))) : life) + 20 * run.period
  const most = Math.max(20, Math.floor(Math.min(finePieces, run.work.pieces / 2) / (run.held.older.length + run.held.newer.length) / weightOf(run.held.order))) * run.period
  const quick = Math.min(wanted, most)
  simulation.extendTo(quick)
  const reachable = !coarse || Math.abs(remains.effort[0]!) < run.limit
  const longest = mostLives * (life + quick)
  while (reachable && !simulation.exhausted && simulation.time < Math.min(longest, simulation.limitedUntil + quick)) simulation.extendTo(simulation.limitedUntil + quick)
  let settled = reachable && simulation.time >= simulation.limitedUntil + quick
  if (simulation.exhausted) refuseMoreWork('loop.samplePeriod')
  // Where the slow roots would swing into the limit once more, nothing but following them tells what comes of it.
  if (settled && coarse && !simulation.finish(poles, simulation.limitedUntil + life)) {
    do simulation.extendTo(simulation.limitedUntil + life)
    while (!simulation.exhausted && simulation.time < Math.min(longest, simulation.limitedUntil + life))
    if (simulation.exhausted) refuseMoreWork('loop.samplePeriod')
    settled = simulation.time >= simulation.limitedUntil + life
  }
  return {
    output: trajectoryOf(simulation.output, { remains: remains.output, decays: settled }),
    effort: trajectoryOf(simulation.effort, { remains: remains.effort, decays: settled }),
    ...(run.limit === Infinity ? {} : { bound: run.limit, limitedUntil: settled ? simulation.limitedUntil : Infinity }),
  }
}

/** A response without end: followed as far as it is asked for. */
function growing(simulation: SampledSimulation, pieces: PiecewiseSignal): Trajectory {
  simulation.extendTo(simulation.time + 1e-300)
  return {
    ...trajectoryOf(pieces, { remains: [0], decays: false }),
    sample(dt, count) {
      simulation.extendTo(dt * (count - 1) * (1 + 1e-12))
      return Array.from({ length: count }, (_, k) => pieces.at(k * dt))
    },
  }
}
