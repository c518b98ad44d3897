import type { Search } from './search'
import type { Limit, Steps } from './types'

/** What is searched through. */
export interface Room {
  /** Evaluations foreseen. */
  planned: number
  /** How many places there are, where there are but a few. */
  places?: number
  searchThrough: (search: Search) => Steps<void>
  /** What keeps the best point that was found from being faster. */
  whatBinds: (search: Search) => Steps<Limit[]>
}

/** ln of the factor on the present natural frequency, to both sides: three decades in all. */
export const frequencyReach = 1.5 * Math.LN10
/** How far beside the best point what binds is looked for: ln of frequency or gain, and damping ratio. */
export const beside = 1e-3
