import { isBetter, isCloser, meetsAll, type Order, type Trial } from './trial'
import type { Steps } from './types'

/** A trial with its place on the line that is searched. */
export interface Placed {
  x: number
  trial: Trial
}

/** Evaluates a place; for a search within a search, the best that the inner one finds there. */
export type Line = (x: number) => Steps<Trial>

/** A place with the ends of the piece about it in which something better may lie; an end may be the place itself. */
export interface Valley {
  from: number
  lowest: Placed
  to: number
}

/** (3 - sqrt 5)/2: where golden section divides. */
const golden = (3 - Math.sqrt(5)) / 2
const mostEdges = 2
/** Steps downhill at most. */
const longestDescent = 5

interface LineSearch {
  /** From -reach to reach. */
  reach: number
  /** Of the grid. */
  pieces: number
  /** Places of the grid that are closed in on, to the accuracy. */
  valleys: number
  accuracy: number
  /** Whether the edges of what meets every requirement are looked at where no valley led. */
  edges: boolean
}

/**
 * The best place on a line: an even grid, whose best valleys are closed in on. Where nothing meets every requirement, the place that comes closest is
 * closed in on as well, so that what is said of it is not the chance of the grid.
 * @param bestSoFar of the whole search, of which this line may be a part
 */
export function* searchLine(line: Line, { reach, pieces, valleys, accuracy, edges }: LineSearch, bestSoFar: () => Trial | null): Steps<Trial> {
  const places: Placed[] = []
  for (let n = 0; n <= pieces; n++) {
    const x = reach * (2 * n / pieces - 1)
    places.push({ x, trial: yield* line(x) })
  }
  const found: Placed[] = []
  for (const valley of valleysOf(places, isBetter, valleys)) found.push(yield* narrow(line, valley, accuracy, isBetter))
  if (edges) for (const edge of edgesOf(places, found, mostEdges)) found.push(...yield* approach(line, edge, accuracy))
  if (bestSoFar() === null) {
    for (const valley of valleysOf(places, isCloser, 1)) yield* narrow(line, valley, accuracy, isCloser)
  }
  return [...places, ...found].reduce((best, { trial }) => isBetter(trial, best) ? trial : best, places[0]!.trial)
}

/** The places that no neighbour betters, at most so many, the best ones first; of equal neighbours the first stands for all. */
export function valleysOf(places: readonly Placed[], order: Order, most: number): Valley[] {
  return places
    .flatMap((lowest, n): Valley[] => {
      const [before, after] = [places[n - 1], places[n + 1]]
      if (lowest.trial.hindrance !== null || (before && !order(lowest.trial, before.trial)) || (after && order(after.trial, lowest.trial))) return []
      return [{ from: before?.x ?? lowest.x, lowest, to: after?.x ?? lowest.x }]
    })
    .sort(({ lowest: { trial: a } }, { lowest: { trial: b } }) => order(a, b) ? -1 : order(b, a) ? 1 : 0)
    .slice(0, most)
}

interface Edge {
  inside: Placed
  outside: Placed
}

/** Places that meet every requirement beside one that does not, unless a valley was closed in on between the two; the fastest of them first. */
function edgesOf(places: readonly Placed[], closedIn: readonly Placed[], most: number): Edge[] {
  const isBetween = (x: number, { inside, outside }: Edge) => (x - inside.x) * (x - outside.x) < 0
  return places
    .flatMap((inside, n) => [places[n - 1], places[n + 1]].flatMap(outside => outside ? [{ inside, outside }] : []))
    .filter(edge => meetsAll(edge.inside.trial) && !meetsAll(edge.outside.trial) && !closedIn.some(({ x }) => isBetween(x, edge)))
    .sort((a, b) => a.inside.trial.settlingTime! - b.inside.trial.settlingTime!)
    .slice(0, most)
}

/**
 * Halves its way to an edge. Close to one the settling time may fall after all: where the integral gain goes to 0, its slow tail shrinks into the settling
 * band.
 */
function* approach(line: Line, edge: Edge, accuracy: number): Steps<Placed[]> {
  let { inside, outside } = edge
  const seen: Placed[] = []
  while (Math.abs(outside.x - inside.x) > accuracy) {
    const x = (inside.x + outside.x) / 2
    const here = { x, trial: yield* line(x) }
    seen.push(here)
    if (meetsAll(here.trial)) inside = here
    else outside = here
  }
  return seen
}

/**
 * Closes in on the best place of a valley by golden section (J. Kiefer, "Sequential minimax search for a maximum", 1953), until the piece that is left is
 * as short as `accuracy`. It asks for an order alone, so that an edge beyond which a requirement breaks, a jump of the settling time and a smooth
 * minimum are found alike.
 */
export function* narrow(line: Line, { from, lowest, to }: Valley, accuracy: number, order: Order): Steps<Placed> {
  while (to - from > accuracy && lowest.trial.hindrance === null) {
    const x = to - lowest.x > lowest.x - from ? lowest.x + golden * (to - lowest.x) : lowest.x - golden * (lowest.x - from)
    const here = { x, trial: yield* line(x) }
    const better = order(here.trial, lowest.trial)
    // The worse of the two becomes an end of the piece, on its own side.
    const end = better ? lowest : here
    if ((x > lowest.x) === better) from = end.x
    else to = end.x
    if (better) lowest = here
  }
  return lowest
}

/** The valley that a walk downhill ends in, in equal steps from a place, between -reach and reach. */
export function* descend(line: Line, start: number, step: number, reach: number, order: Order): Steps<Valley> {
  const at = function* (place: number): Steps<Placed> {
    const x = Math.min(reach, Math.max(-reach, place))
    return { x, trial: yield* line(x) }
  }
  let [before, lowest, after] = [yield* at(start - step), yield* at(start), yield* at(start + step)]
  for (let steps = 0; steps < longestDescent; steps++) {
    if (order(after.trial, lowest.trial)) [before, lowest, after] = [lowest, after, yield* at(after.x + step)]
    else if (order(before.trial, lowest.trial)) [before, lowest, after] = [yield* at(before.x - step), before, lowest]
    else break
  }
  return { from: before.x, lowest, to: after.x }
}
