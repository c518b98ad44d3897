import { roomOf } from './best-point/rooms'
import { beginSearch, Enough } from './best-point/search'
import { startOf } from './best-point/start'
import { toCandidate } from './best-point/trial'
import type { BestPoint, SearchRoom, Steps } from './best-point/types'
import type { DesignTarget } from './solve'
import type { Controller, LoopModel, Requirement, ResponseOptions } from './types'

export interface BestPointOptions {
  over: SearchRoom
  requirements?: readonly Requirement[]
  response?: Pick<ResponseOptions, 'amplitude' | 'settlingBandPercent'>
}

/**
 * The fastest design that meets every requirement, as a search in steps: the smallest settling time of the whole loop among stable designs without
 * negative gains. The same question always gets the same answer, in a bounded number of evaluations (see `budget`).
 *
 * @param target where the design stands now: the middle of the search
 * @throws NoAnswerError (at the first step) where there is nothing to search: a ray that leads to no stable point or meets no locus, no scale to search at
 * @throws InvalidInputError where the target is none of the form
 */
export function* bestPoint(model: LoopModel, controller: Controller, target: DesignTarget, options: BestPointOptions): Steps<BestPoint> {
  const { over, requirements = [], response = {} } = options
  const problem = { model, controller, requirements, response }
  const start = startOf(problem, target)
  const room = roomOf(problem, start, over)
  const search = beginSearch(problem, { over, planned: room.planned, timeScale: 1 / start.naturalFrequency, present: reachesEveryPoint(controller) ? start.trial : null })
  const cutShort = yield* untilEnough(room.searchThrough(search))
  search.finish()
  const binding = search.best() ? yield* room.whatBinds(search) : []
  const [best, closest] = [search.best(), search.closest()]
  return {
    over,
    best: best && toCandidate(best),
    binding,
    tied: search.tied(),
    closest: best || !closest ? null : toCandidate(closest),
    hindrance: best || closest ? null : search.hindrance(),
    settlingTimeBefore: start.trial.settlingTime,
    places: room.places ?? null,
    evaluations: search.evaluations(),
    cutShort,
  }
}

/** Of the forms with one gain only places on the locus count, and the rooms know those. */
function reachesEveryPoint({ form }: Controller): boolean {
  return form !== 'gain' && form !== 'lag'
}

function* untilEnough(steps: Steps<void>): Steps<BestPoint['cutShort']> {
  try {
    yield* steps
    return null
  }
  catch (error) {
    if (error instanceof Enough) return error.reason
    throw error
  }
}
