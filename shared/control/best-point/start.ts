import { describePoint, type DesignPointFigures } from '../design-point'
import { NoAnswerError } from '../errors'
import type { DesignTarget } from '../solve'
import { evaluate, type Problem, type Trial } from './trial'

/** Where a search begins: the design point as it stands, evaluated. */
export interface Start extends DesignPointFigures {
  trial: Trial
}

/**
 * The present design as the middle of a search. A point that the controller form does not reach will do, since others may be reached.
 * @throws NoAnswerError for gains that have no answer, and for a point at the origin
 */
export function startOf(problem: Problem, target: DesignTarget): Start {
  const trial = evaluate(problem, target, 1)
  if ('gains' in target && trial.hindrance?.kind === 'unreachable') throw new NoAnswerError(trial.hindrance.message, 'gains')
  const point = describePoint(trial.designPoint)
  if (point.naturalFrequency === 0) {
    throw new NoAnswerError('the design point lies at the origin, which gives the search no scale: begin somewhere else', 'designPoint')
  }
  return { ...point, trial }
}
