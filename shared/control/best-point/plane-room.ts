import { pointFromDamping } from '../design-point'
import type { DesignTarget } from '../solve'
import { whatBinds, type Neighbour } from './binding'
import { descend, narrow, searchLine, valleysOf, type Line, type Placed } from './line-search'
import { beside, frequencyReach, type Room } from './room'
import type { Search } from './search'
import type { Start } from './start'
import { isBetter } from './trial'
import type { Steps } from './types'

/** Less damping than this is not looked at, save on the present ray. */
const leastDamping = 0.1
const rays = 20
/** Present ray and rays of the grid: what `searchLine` is told. */
const fine = { reach: frequencyReach, pieces: 80, valleys: 3, accuracy: 1e-5, edges: true }
const coarse = { reach: frequencyReach, pieces: 56, valleys: 1, accuracy: 0.03, edges: false }
/** Rays between which the best one is closed in on, and to what damping ratio. */
const closeIn = { valleys: 3, accuracy: 1e-4 }
/** The search along each of them: ln of the frequency, and how long the first step is. */
const inner = { accuracy: 1e-5, step: 0.04 }

/** Every ray: the best frequency on each, and of the rays the best, by one search within another. The present ray is among them, searched in full. */
export function planeRoom({ dampingRatio, naturalFrequency }: Start): Room {
  const targetAt = (ratio: number, x: number): DesignTarget => ({ designPoint: pointFromDamping(ratio, naturalFrequency * Math.exp(x)) })
  const placeOf = ({ re, im }: { re: number, im: number }) => Math.log(Math.hypot(re, im) / naturalFrequency)
  const ray = (search: Search, ratio: number): Line => x => search.attempt(targetAt(ratio, x))

  return {
    planned: 2300,
    * searchThrough(search) {
      const found: Placed[] = []
      for (const x of dampingRatios(dampingRatio)) {
        found.push({ x, trial: yield* searchLine(ray(search, x), x === dampingRatio ? fine : coarse, search.best) })
      }
      for (const valley of valleysOf(found, isBetter, closeIn.valleys)) {
        let lowest = valley.lowest.trial
        const bestOnRay = function* (ratio: number): Steps<Placed['trial']> {
          const along = ray(search, ratio)
          const near = yield* descend(along, placeOf(lowest.designPoint), inner.step, frequencyReach, isBetter)
          const { trial } = yield* narrow(along, near, inner.accuracy, isBetter)
          if (isBetter(trial, lowest)) lowest = trial
          return trial
        }
        yield* narrow(bestOnRay, valley, closeIn.accuracy, isBetter)
      }
    },
    whatBinds: search => whatBinds(search, ({ designPoint: { re, im } }) => neighbours(-re / Math.hypot(re, im), placeOf({ re, im }), targetAt)),
  }
}

/** An even grid from the least damping to the real axis, with the present ray in it. */
function dampingRatios(present: number): number[] {
  const grid = Array.from({ length: rays }, (_, n) => leastDamping + (1 - leastDamping) * n / (rays - 1))
  if (present <= 0) return grid
  return [...grid.filter(ratio => Math.abs(ratio - present) > 1e-3), present].sort((a, b) => a - b)
}

/** The eight about a point, those beyond the real axis left out. */
function neighbours(ratio: number, x: number, targetAt: (ratio: number, x: number) => DesignTarget): Neighbour[] {
  const ways = [-beside, 0, beside]
  return ways.flatMap(dx => ways.map(dr => ({ dx, dr })))
    .filter(({ dx, dr }) => (dx !== 0 || dr !== 0) && ratio + dr <= 1)
    .map(({ dx, dr }) => ({
      target: targetAt(ratio + dr, x + dx), inside: Math.abs(x + dx) <= frequencyReach && ratio + dr >= leastDamping,
    }))
}
