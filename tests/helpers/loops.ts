import { multiply } from '#shared/numerics/polynomial'
import { solveDesign, type SolveOptions } from '#shared/control/solve'
import type { DesignSolution, LoopModel, TransferFunction } from '#shared/control/types'

/** A loop around a plant given by coefficients, without inner feedback. */
export function loopOf(numerator: number[], denominator: number[]): LoopModel {
  return { plant: { numerator, denominator }, rateFeedback: 0 }
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
