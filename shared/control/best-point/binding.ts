import type { DesignTarget } from '../solve'
import type { Search } from './search'
import type { Trial } from './trial'
import type { Limit, Steps } from './types'

/** A place just beside the best point, and whether it belongs to the room that is searched. */
export interface Neighbour {
  target: DesignTarget
  inside: boolean
}

/** A look beside the best point may find a better one, since the search ends at an accuracy: then the look is taken from there, this often at most. */
const mostMoves = 2

/**
 * What keeps the best point from being faster: what is broken at those of its neighbours that would be. Where none is faster nothing is named, and the
 * loop itself is the limit.
 * @param around the neighbours of a point, a thousandth of its size away
 */
export function* whatBinds(search: Search, around: (best: Trial) => Neighbour[]): Steps<Limit[]> {
  for (let moves = 0; ; moves++) {
    const best = search.best()!
    const neighbours: { trial: Trial, inside: boolean }[] = []
    for (const { target, inside } of around(best)) neighbours.push({ trial: yield* search.attempt(target, inside), inside })
    if (search.best() === best || moves === mostMoves) return limitsBeside(best, neighbours)
  }
}

/** What is broken where it would be faster; out of reach is said only where nothing else is, since nobody knows how fast it would be there. */
export function limitsBeside(best: Trial, neighbours: readonly { trial: Trial, inside: boolean }[]): Limit[] {
  const faster = neighbours.filter(({ trial }) => trial.settlingTime !== null && trial.settlingTime < best.settlingTime!)
  const limits = new Set(faster.flatMap(({ trial, inside }): Limit[] => {
    if (trial.unmet > 0) return trial.verdicts.filter(({ met }) => !met).map(({ reading }) => reading)
    if (trial.hindrance !== null) return ['negative-gain']
    return inside ? [] : ['border']
  }))
  if (limits.size === 0 && neighbours.some(({ trial }) => trial.gains === null)) return ['reach']
  return [...limits]
}
