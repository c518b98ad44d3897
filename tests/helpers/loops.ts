import { loopFunctions } from '#shared/control/controller'
import type { Complex } from '#shared/numerics/complex'
import { multiply } from '#shared/numerics/polynomial'
import { roots } from '#shared/numerics/roots'
import { solveDesign, type SolveOptions } from '#shared/control/solve'
import type { Controller, DesignSolution, Gains, LoopModel, TransferFunction } from '#shared/control/types'

/** A loop around a plant given by coefficients, without inner feedback. */
export function loopOf(numerator: number[], denominator: number[]): LoopModel {
  return { plant: { numerator, denominator }, rateFeedback: 0 }
}

/** One gain with a fixed shape. */
export function shaped(numerator: number[], denominator: number[]): Controller {
  return { form: 'gain', shape: { numerator, denominator } }
}

/** Places on the real axis. */
export function real(...places: number[]): Complex[] {
  return places.map(re => ({ re, im: 0 }))
}

/** A complex figure as the published cases write it. */
export function pair({ re, im }: Complex): [number, number] {
  return [re, im]
}

/** The closed-loop roots on the real axis: without the pair of the design. */
export function realRootsAt(model: LoopModel, controller: Controller, gains: Gains): number[] {
  return roots(loopFunctions(model, controller, gains).characteristic).filter(root => root.im === 0).map(root => root.re)
}

/** Product of factors, each a polynomial in descending powers. */
export function product(...factors: number[][]): number[] {
  return factors.reduce((all, factor) => multiply(all, factor), [1])
}

/** A unity-feedback loop with this loop transfer, as it stands. */
export function evaluateLoop(loop: TransferFunction, options?: SolveOptions): DesignSolution {
  return solveDesign(loopOf(loop.numerator, loop.denominator), { form: 'gain' }, { gains: { k: 1 } }, options)
}

/** The unity-feedback loop L = T/(1 - T) whose closed loop is T = numerator/denominator. */
export function closedLoopOf(numerator: number[], denominator: number[], options?: SolveOptions): DesignSolution {
  const shift = denominator.length - numerator.length
  return evaluateLoop({ numerator, denominator: denominator.map((c, i) => c - (numerator[i - shift] ?? 0)) }, options)
}
