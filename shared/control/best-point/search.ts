import { distance, type Complex } from '../../numerics/complex'
import type { DesignTarget } from '../solve'
import { evaluate, isBetter, isCloser, meetsAll, toCandidate, type Problem, type Trial } from './trial'
import type { BestPoint, Hindrance, SearchProgress, SearchRoom, Steps } from './types'

/** Evaluations that a search may take; those that tell what binds are kept back from the rest. */
export const budget: Record<SearchRoom, number> = { ray: 200, plane: 2500 }
const keptBack: Record<SearchRoom, number> = { ray: 10, plane: 30 }

/** The search was told to end, or its evaluations are used up. */
export class Enough extends Error {
  constructor(readonly reason: NonNullable<BestPoint['cutShort']>) {
    super(`the search ends: ${reason}`)
  }
}

/** What a search has seen so far; every evaluation goes through `attempt`. */
export interface Search {
  /** One evaluation. `counts`: its point may become the best; false for looks beyond the room that is searched. */
  attempt: (target: DesignTarget, counts?: boolean) => Steps<Trial>
  best: () => Trial | null
  closest: () => Trial | null
  hindrance: () => Hindrance | null
  /** Whether a point well apart from the best settles as fast. */
  tied: () => boolean
  evaluations: () => number
  /** From here on the evaluations that were kept back may be used, and nobody is asked any more whether to go on. */
  finish: () => void
}

/** Settling times this close (relative) are equal. */
const equalTimes = 1e-9
/** Points this far apart (relative) are two. */
const apart = 0.02
/** An unstable loop or negative gains can be cured by going elsewhere; what is out of reach altogether is told last. */
const told: readonly Hindrance['kind'][] = ['unsettled', 'negative-gain', 'unstable', 'unreachable']

interface Plan {
  over: SearchRoom
  /** How many evaluations are foreseen, for the share that is done. */
  planned: number
  /** Seconds, of the order in which the loop moves. */
  timeScale: number
  /** The present design where it is one of the room: no search may come out worse than what is there. */
  present: Trial | null
}

/** The account of a search; that of the point where it starts is the first evaluation. */
export function beginSearch(problem: Problem, { over, planned, timeScale, present }: Plan): Search {
  let evaluations = 1
  let finishing = false
  let best: Trial | null = null
  let closest: Trial | null = null
  let hindrance: Hindrance | null = null
  /** Of the points that meet everything: where, and how fast. */
  const met: { point: Complex, settlingTime: number }[] = []

  function see(trial: Trial): void {
    if (trial.hindrance !== null) {
      if (hindrance === null || told.indexOf(trial.hindrance.kind) < told.indexOf(hindrance.kind)) hindrance = trial.hindrance
      return
    }
    if (closest === null || isCloser(trial, closest)) closest = trial
    if (!meetsAll(trial)) return
    met.push({ point: trial.designPoint, settlingTime: trial.settlingTime! })
    if (best === null || isBetter(trial, best)) best = trial
  }

  if (present !== null) see(present)

  function progress(): SearchProgress {
    return { share: Math.min(1, evaluations / planned), evaluations, best: best && toCandidate(best) }
  }

  return {
    * attempt(target, counts = true) {
      if (!finishing && evaluations >= budget[over] - keptBack[over]) throw new Enough('evaluations')
      evaluations++
      const trial = evaluate(problem, target, timeScale)
      if (counts) see(trial)
      const enough = yield progress()
      if (enough && !finishing) throw new Enough('time')
      return trial
    },
    best: () => best,
    closest: () => closest,
    hindrance: () => hindrance,
    tied: () => best !== null && met.some(({ point, settlingTime }) =>
      settlingTime <= best!.settlingTime! * (1 + equalTimes) && distance(point, best!.designPoint) > apart * Math.hypot(point.re, point.im)),
    evaluations: () => evaluations,
    finish: () => { finishing = true },
  }
}
