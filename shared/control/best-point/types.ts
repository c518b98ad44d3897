import type { DesignPointFigures } from '../design-point'
import type { Gains, ReadingName, Verdict } from '../types'

/** `ray`: the ray of the present damping ratio; `plane`: every ray, or for a form with one free gain the whole locus. */
export type SearchRoom = 'ray' | 'plane'

export interface Candidate {
  designPoint: DesignPointFigures
  gains: Gains
  /** Seconds, of the whole loop; null where the response has none. */
  settlingTime: number | null
  verdicts: Verdict[]
}

/**
 * What keeps a best point from being faster: a requirement, by its reading; `border`: the border of the search; `negative-gain`: faster points ask for
 * positive feedback; `reach`: beside it the controller form reaches no point.
 */
export type Limit = ReadingName | 'border' | 'negative-gain' | 'reach'

/** Why not one stable design with positive gains was found; `unreachable` carries what the placement says. */
export type Hindrance = { kind: 'unstable' | 'negative-gain' | 'unsettled' } | { kind: 'unreachable', message: string }

export interface BestPoint {
  over: SearchRoom
  /** The fastest point found that meets every requirement; null where none does. */
  best: Candidate | null
  /** What keeps `best` from being faster; empty: nothing but the loop itself. */
  binding: Limit[]
  /** Whether points apart from `best` settle equally fast. */
  tied: boolean
  /** Where `best` is null: the stable design that comes closest (fewest requirements broken, then by the least share of their limits). */
  closest: Candidate | null
  /** Where there is neither. */
  hindrance: Hindrance | null
  /** Seconds that the design takes to settle where the search began; null where it does not. */
  settlingTimeBefore: number | null
  /** Places at which the ray meets the locus, where those alone were searched; else null. */
  places: number | null
  evaluations: number
  /** What ended the search early; null: it came to its end. */
  cutShort: 'evaluations' | 'time' | null
}

export interface SearchProgress {
  /** Share of the search that is done, 0 to 1; never falls. */
  share: number
  evaluations: number
  best: Candidate | null
}

/** A search in steps, one evaluation of the loop each. Answering a step with `true` ends it with what was found so far. */
export type Steps<Result> = Generator<SearchProgress, Result, boolean | undefined>
