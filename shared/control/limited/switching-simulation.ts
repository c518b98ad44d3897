import type { Complex } from '../../numerics/complex'
import { findRoot } from '../../numerics/find-root'
import { leading } from '../../numerics/polynomial'
import { roots } from '../../numerics/roots'
import type { LoopFunctions } from '../controller'
import { PiecewiseSignal } from '../response/piecewise'
import { respond } from '../response/response'
import { realise, sectionsOf, type StateSpace } from '../response/state-space'
import { nodesPerPiece, StepPropagator } from '../response/step-propagator'
import { preparationOf, weightOf, type Work } from '../response/work'
import { polynomialAt, type Trajectory } from '../response/trajectory'
import { relativeDegree } from '../transfer-function'
import type { ResponseInput, TransferFunction } from '../types'

/** Turn (radians) of the fastest living pole over one piece. */
const pieceAngle = 1
const lifetimes = 40
/** Rounding that is let pass before the limit counts as reached or left, as a share of it. */
const slack = 1e-12
const last = nodesPerPiece - 1

/** 0: the controller is heard; 1, -1: it is held at the upper or lower limit. */
type Mode = 0 | 1 | -1

/**
 * A continuous loop whose controller output is cut off at a limit, without dead time: linear at all times, with one of three laws, and the instants of change found on
 * the exact solution. The controller does not know of the limit: what it integrates meanwhile goes on.
 */
export class SwitchingSimulation {
  readonly output = new PiecewiseSignal()
  readonly effort = new PiecewiseSignal()
  limitedUntil = 0
  time = 0
  private mode: Mode = 0
  private switchedAt = 0
  private state: Float64Array
  private readonly free: Trajectory
  private readonly disturbed: number
  private readonly weight: number
  private readonly direct: number
  private readonly laws: { heard: Law, cut: Law }
  private readonly prepared = new Map<string, StepPropagator>()
  private readonly moving: { speed: number, life: number }[]

  constructor(functions: LoopFunctions, closedLoopPoles: readonly Complex[], input: ResponseInput, private readonly work: Work, private readonly limit: number) {
    const { loop, disturbance, controller } = functions
    const poles = roots(loop.denominator)
    const system = realise(sectionsOf(poles), loop.denominator)
    const directOf = (g: TransferFunction) => relativeDegree(g) === 0 ? leading(g.numerator) / leading(g.denominator) : 0
    const plant: TransferFunction = { numerator: disturbance.numerator, denominator: loop.denominator }
    this.direct = directOf(loop)
    this.laws = lawsOf(system, { weights: system.outputOf(plant.numerator), direct: directOf(plant) }, { weights: system.outputOf(loop.numerator), direct: this.direct })
    const silent: TransferFunction = { numerator: [0], denominator: [1] }
    const fromReference = input !== 'disturbance-step'
    this.free = respond(fromReference ? controller : silent, fromReference ? roots(controller.denominator) : [], input === 'reference-ramp' ? 2 : 1)
    this.disturbed = fromReference ? 0 : 1
    this.state = new Float64Array(system.input.length)
    this.weight = weightOf(system.input.length)
    this.moving = [...poles, ...closedLoopPoles].map(({ re, im }) => ({ speed: Math.hypot(re, im), life: re < 0 ? lifetimes / -re : Infinity }))
    const u = (this.freeAt(0) - this.direct * this.disturbed) / (1 + this.direct)
    this.mode = u > limit ? 1 : u < -limit ? -1 : 0
  }

  get exhausted(): boolean {
    return this.work.pieces <= 0
  }

  extendTo(t: number): void {
    while (this.time < t && !this.exhausted) this.followPiece()
  }

  private freeAt(t: number): number {
    return polynomialAt(this.free.remains, t) + this.free.transient(t)
  }

  private followPiece(): void {
    this.work.pieces -= this.weight
    const length = this.stepLength()
    const piece = this.piece(length, true)
    const change = this.changeIn(piece.effort)
    if (change === null) this.take(piece, length)
    else {
      const part = Math.max(change * length / last, Number.EPSILON * Math.max(this.time, length))
      this.take(this.piece(part, false), part)
      this.mode = this.mode !== 0 ? 0 : this.effortAhead > 0 ? 1 : -1
      this.switchedAt = this.time
    }
  }

  /** Sign of the controller output at the change. */
  private effortAhead = 0

  private take({ output, effort, end }: Piece, length: number): void {
    const cut = this.mode === 0 ? effort : effort.map(() => this.mode * this.limit)
    this.output.add(this.time, length, output)
    this.effort.add(this.time, length, cut)
    this.effortAhead = effort[last]!
    this.state = end
    this.time += length
    if (this.mode !== 0) this.limitedUntil = this.time
  }

  /** Output and the controller's own wish over the next piece under the present law. */
  private piece(length: number, keep: boolean): Piece {
    const { mode, direct, disturbed, limit, time } = this
    const law = mode === 0 ? this.laws.heard : this.laws.cut
    const step = this.propagator(law, length, keep)
    const free = Float64Array.from({ length: nodesPerPiece }, (_, node) => this.freeAt(time + length * node / last))
    if (mode === 0) {
      const input = free.map(f => (f - direct * disturbed) / (1 + direct) + disturbed)
      return { output: step.values(0, this.state, input), effort: step.values(1, this.state, input).map(w => w - disturbed), end: step.end(this.state, input) }
    }
    const held = mode * limit + disturbed
    const back = step.valuesHeld(1, this.state, held)
    return { output: step.valuesHeld(0, this.state, held), effort: free.map((f, node) => f - back[node]!), end: step.endHeld(this.state, held) }
  }

  private propagator(law: Law, length: number, keep: boolean): StepPropagator {
    const key = `${law.name} ${length}`
    const known = this.prepared.get(key)
    if (known) return known
    const step = new StepPropagator(law.system, law.outputs, length)
    this.work.pieces -= preparationOf(law.system.input.length)
    if (keep) this.prepared.set(key, step)
    return step
  }

  /** A power of two of a second that resolves what lives since the law last changed. */
  private stepLength(): number {
    const since = this.time - this.switchedAt
    const fastest = this.moving.reduce((most, { speed, life }) => since < life ? Math.max(most, speed) : most, 0)
    const slowest = this.moving.reduce((least, { speed }) => speed > 0 ? Math.min(least, speed) : least, Infinity)
    return 2 ** Math.floor(Math.log2(pieceAngle / (fastest > 0 ? fastest : Number.isFinite(slowest) ? slowest : 1)))
  }

  /** Where in a piece (0..8) the law changes: the limit is passed, or the controller's wish has come back within it. */
  private changeIn(effort: Float64Array): number | null {
    const { mode, limit } = this
    const beyond = (u: number) => mode === 0 ? Math.abs(u) - limit * (1 + slack) : limit * (1 - slack) - mode * u
    for (let node = 1; node < nodesPerPiece; node++) {
      if (beyond(effort[node]!) <= 0) continue
      const signal = new PiecewiseSignal()
      signal.add(0, last, effort)
      const [from, to] = [beyond(effort[node - 1]!), beyond(effort[node]!)]
      return from < 0 && to > 0 ? findRoot(t => beyond(signal.at(t)), node - 1, node, 1e-13) : node - 1
    }
    return null
  }
}

interface Piece { output: Float64Array, effort: Float64Array, end: Float64Array }

interface Law {
  name: string
  system: Pick<StateSpace, 'matrix' | 'input'>
  outputs: { weights: Float64Array, direct: number }[]
}

interface Output { weights: Float64Array, direct: number }

/**
 * The loop cut open at its limit (outputs: y, and what comes back to the controller), and closed (outputs: y, and the plant's input), where the plant's input is
 * w = (free - back x)/(1 + direct) + disturbance.
 */
function lawsOf({ matrix, input }: StateSpace, y: Output, back: Output): { heard: Law, cut: Law } {
  const n = input.length
  const share = 1 / (1 + back.direct)
  const closed = matrix.slice()
  for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) closed[i * n + j]! -= input[i]! * back.weights[j]! * share
  const fed = back.weights.map(weight => -weight * share)
  return {
    heard: {
      name: 'heard', system: { matrix: closed, input },
      outputs: [{ weights: y.weights.map((weight, j) => weight + y.direct * fed[j]!), direct: y.direct }, { weights: fed, direct: 1 }],
    },
    cut: { name: 'cut', system: { matrix, input }, outputs: [y, back] },
  }
}
