import { analyzeLoop } from '../analyze'
import { pointFromDamping } from '../design-point'
import { NoAnswerError } from '../errors'
import { scaleGains } from '../scale-gains'
import type { DesignTarget } from '../solve'
import type { Gains } from '../types'
import { limitsBeside, whatBinds } from './binding'
import { searchLine } from './line-search'
import { planeRoom } from './plane-room'
import { beside, frequencyReach, type Room } from './room'
import type { Start } from './start'
import type { Problem, Trial } from './trial'
import type { SearchRoom } from './types'

/** ln of the factor on the present gain, to both sides: as far as the gain window goes. */
const gainReach = 3 * Math.LN10

/**
 * The room of a search. Forms that reach every point: natural frequency along the present ray, or every ray. Forms with one free gain: where the present
 * ray meets the locus, or the whole locus by its gain.
 * @throws NoAnswerError where the room is empty
 */
export function roomOf(problem: Problem, start: Start, over: SearchRoom): Room {
  const { form } = problem.controller
  if (over === 'ray' && start.dampingRatio <= 0) {
    throw new NoAnswerError('this ray does not lead into the left half plane, so no point on it is stable', 'designPoint')
  }
  if (form === 'gain' || form === 'lag') return over === 'ray' ? meetingsRoom(problem, start) : locusRoom(start)
  return over === 'ray' ? rayRoom(start) : planeRoom(start)
}

function rayRoom({ dampingRatio, naturalFrequency }: Start): Room {
  return lineRoom({
    reach: frequencyReach, pieces: 80, valleys: 3, planned: 165,
    targetAt: x => ({ designPoint: pointFromDamping(dampingRatio, naturalFrequency * Math.exp(x)) }),
    placeOf: ({ designPoint: { re, im } }) => Math.log(Math.hypot(re, im) / naturalFrequency),
  })
}

function locusRoom({ trial }: Start): Room {
  const gains = presentGain(trial)
  return lineRoom({
    reach: gainReach, pieces: 240, valleys: 8, planned: 420,
    targetAt: x => ({ gains: scaleGains(gains, Math.exp(x)) }),
    placeOf: best => Math.log((best.gains as { k: number }).k / gains.k),
  })
}

function presentGain({ gains, hindrance }: Trial): Gains & { k: number } {
  if (hindrance?.kind === 'unreachable') throw new NoAnswerError(hindrance.message, 'designPoint')
  const present = gains as Gains & { k: number }
  if (present.k === 0) throw new NoAnswerError('the gain is 0 here, which gives the search no scale: begin somewhere else on the locus', 'designPoint')
  return { ...present, k: Math.abs(present.k) }
}

interface LineFigures {
  /** The line goes from -reach to reach, the present design in the middle. */
  reach: number
  pieces: number
  /** Places of the grid that are closed in on. */
  valleys: number
  planned: number
  targetAt: (x: number) => DesignTarget
  placeOf: (best: Trial) => number
}

function lineRoom({ reach, pieces, valleys, planned, targetAt, placeOf }: LineFigures): Room {
  return {
    planned,
    * searchThrough(search) {
      yield* searchLine(x => search.attempt(targetAt(x)), { reach, pieces, valleys, accuracy: 1e-5, edges: true }, search.best)
    },
    whatBinds: search => whatBinds(search, best => [-beside, beside].map((way) => {
      const x = placeOf(best) + way
      return { target: targetAt(x), inside: Math.abs(x) <= reach }
    })),
  }
}

/** The few places at which a single gain puts a root on the ray: all of them are looked at. */
function meetingsRoom({ model, controller }: Problem, { dampingRatio }: Start): Room {
  // Without the rounding that a drag along the ray leaves: at damping ratio 1 the meetings are the breakaway points.
  const meetings = analyzeLoop(model, controller, { dampingRatio: Number(dampingRatio.toPrecision(12)) }).rayIntersections!
  if (meetings.length === 0) throw new NoAnswerError('this ray does not meet the locus: no gain puts a root on it', 'designPoint')
  const trials: Trial[] = []
  return {
    planned: meetings.length + 1,
    places: meetings.length,
    * searchThrough(search) {
      for (const { point } of meetings) trials.push(yield* search.attempt({ designPoint: point }))
    },
    * whatBinds(search) {
      return limitsBeside(search.best()!, trials.map(trial => ({ trial, inside: true })))
    },
  }
}
