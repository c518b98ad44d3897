import { findRoot } from '../../numerics/find-root'
import { leading } from '../../numerics/polynomial'
import { roots } from '../../numerics/roots'
import type { LoopFunctions } from '../controller'
import { NoAnswerError } from '../errors'
import { gridOf } from '../response/grid'
import { interpolate, PiecewiseSignal } from '../response/piecewise'
import { respond } from '../response/response'
import { realise, sectionsOf } from '../response/state-space'
import { nodesPerPiece, StepPropagator } from '../response/step-propagator'
import { preparationOf, weightOf, type Work } from '../response/work'
import { polynomialAt, type Trajectory } from '../response/trajectory'
import { relativeDegree } from '../transfer-function'
import type { ResponseInput, TransferFunction } from '../types'

const last = nodesPerPiece - 1
/** How much finer than the loop's own pace the corners of a limited output are resolved, and for how many dead times after the last one. */
const cornerShare = 8
const periodsToSmooth = 4

/**
 * A closed loop with dead time, followed period of the dead time by period: what the plant gets now is what the controller put out one dead time ago, so each
 * period is a linear system with a known input, carried exactly (the method of steps).
 * Source: R. Bellman, K. L. Cooke, "Differential-Difference Equations" (1963).
 */
export class DelaySimulation {
  readonly output = new PiecewiseSignal()
  readonly effort: PiecewiseSignal
  private readonly fine: StepPropagator[]
  private readonly smooth: StepPropagator[]
  private grid: StepPropagator[]
  private readonly free: Trajectory
  private readonly impulse: number
  /** What an impulse of size 1 at the plant input adds to the state. */
  private readonly kick: Float64Array
  private readonly disturbed: number
  private readonly weight: number
  private state: Float64Array
  /** Controller output of the period before, piece by piece. */
  private before: Float64Array[]
  private periods = 0
  /** The last instant at which the limit cut the controller output off. */
  limitedUntil = 0

  /**
   * @param crossover rad/s: up to here the loop acts on what comes back, and the grid resolves it
   * @param limit bound on the size of the controller output
   */
  constructor(private readonly functions: LoopFunctions, input: ResponseInput, crossover: number, private readonly work: Work, private readonly limit = Infinity) {
    const { loop, disturbance, controller, deadTime } = functions
    this.effort = new PiecewiseSignal(limit)
    const poles = roots(loop.denominator)
    const system = realise(sectionsOf(poles), loop.denominator)
    const plant: TransferFunction = { numerator: disturbance.numerator, denominator: loop.denominator }
    const outputs = [plant, loop].map(g => ({ weights: system.outputOf(g.numerator), direct: relativeDegree(g) === 0 ? leading(g.numerator) / leading(g.denominator) : 0 }))
    const prepared = new Map<number, StepPropagator>()
    const prepare = (always: number) => gridOf(deadTime, poles, always).map((length) => {
      if (!prepared.has(length)) {
        work.pieces -= preparationOf(system.input.length)
        prepared.set(length, new StepPropagator(system, outputs, length))
      }
      return prepared.get(length)!
    })
    this.smooth = prepare(crossover)
    this.fine = limit < Infinity ? prepare(cornerShare * crossover) : this.smooth
    this.grid = this.fine
    const integrations = input === 'reference-ramp' ? 2 : 1
    const silent: TransferFunction = { numerator: [0], denominator: [1] }
    this.free = respond(input === 'disturbance-step' ? silent : controller, input === 'disturbance-step' ? [] : roots(controller.denominator), integrations)
    this.impulse = input === 'disturbance-step' || limit < Infinity ? 0 : impulseOf(controller, integrations, loop)
    this.disturbed = input === 'disturbance-step' ? 1 : 0
    this.state = new Float64Array(system.input.length)
    this.before = this.grid.map(() => new Float64Array(nodesPerPiece))
    this.kick = system.input
    this.weight = weightOf(system.input.length)
  }

  get time(): number {
    return this.periods * this.functions.deadTime
  }

  /** Whether the controller output begins with an impulse. */
  get impulsive(): boolean {
    return this.impulse !== 0
  }

  /** Whether the next period would be beyond the work that one response may take. */
  get exhausted(): boolean {
    return this.work.pieces < this.grid.length * this.weight
  }

  /** Follows the loop to t or as far as its allowance of work goes. */
  extendTo(t: number): void {
    while (this.time < t && !this.exhausted) this.followPeriod()
  }

  private followPeriod(): void {
    this.chooseGrid()
    const { grid, disturbed } = this
    if (this.periods === 1 && this.impulse !== 0) this.state = this.state.map((value, i) => value + this.kick[i]! * this.impulse)
    let start = this.time
    this.work.pieces -= grid.length * this.weight
    this.before = grid.map((step, piece) => {
      const w = disturbed === 0 ? this.before[piece]! : this.before[piece]!.map(value => value + disturbed)
      const y = step.values(0, this.state, w)
      const u = step.values(1, this.state, w)
      for (let node = 0; node < nodesPerPiece; node++) {
        const t = start + step.length * node / last
        u[node] = polynomialAt(this.free.remains, t) + this.free.transient(t) - u[node]!
      }
      this.noteLimit(start, step.length, u)
      u.forEach((wanted, node) => { u[node] = Math.max(-this.limit, Math.min(this.limit, wanted)) })
      this.output.add(start, step.length, y)
      this.effort.add(start, step.length, u)
      this.state = step.end(this.state, w)
      start += step.length
      return u
    })
    this.periods += 1
  }

  /** The last instant of a piece at which the controller wishes for more than the limit. */
  private noteLimit(start: number, length: number, wanted: Float64Array): void {
    const beyond = (value: number) => Math.abs(value) - this.limit
    const node = wanted.findLastIndex(value => beyond(value) > 0)
    if (node < 0) return
    const leaves = node === last ? last : findRoot(position => beyond(interpolate(wanted, position)), node, node + 1)
    this.limitedUntil = start + length * leaves / last
  }

  /** Corners that a limit cuts ask for short pieces, until the loop has smoothed them. */
  private chooseGrid(): void {
    const { deadTime } = this.functions
    const wanted = this.limit < Infinity && this.time <= this.limitedUntil + periodsToSmooth * deadTime ? this.fine : this.smooth
    if (wanted === this.grid) return
    this.grid = wanted
    let start = this.time - deadTime
    this.before = wanted.map(({ length }) => {
      const values = Float64Array.from({ length: nodesPerPiece }, (_, node) => this.effort.at(start + length * node / last * (1 - 1e-12)))
      start += length
      return values
    })
  }
}

/** Weight of the impulse that a controller with a derivative makes of a step. */
function impulseOf(controller: TransferFunction, integrations: number, loop: TransferFunction): number {
  const excess = -relativeDegree(controller) - integrations
  if (excess < 0) return 0
  if (excess > 0 || relativeDegree(loop) === 0) {
    throw new NoAnswerError('the controller makes more of a step than an impulse, which with a dead time comes back again and again: give its derivative a filter')
  }
  return leading(controller.numerator) / leading(controller.denominator)
}
