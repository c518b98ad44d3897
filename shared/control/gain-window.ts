import { closeLoop, type ClosedLoop } from './closed-loop'
import { openLoop } from './controller'
import { NoAnswerError, TooMuchWorkError } from './errors'
import { imaginaryAxisCrossings } from './locus/crossings'
import { readAll, type ReadingOptions } from './readings'
import type { LoopResponse } from './response/response'
import { scaleGains } from './scale-gains'
import type { Controller, Gains, GainWindow, Interval, LoopModel, ReadingName, Requirement } from './types'
import { judge } from './verdicts'

/** Factors on the present gain within which the window is looked for. */
const domain: Interval = [1e-3, 1e3]
/** Samples per decade of the gain before any refinement. */
const perDecade = 8
/** Edges are found to this, relative. */
const edgeAccuracy = 1e-6
/** Pieces of a response followed step by step that one sample may take. */
const piecesPerSample = 2500
/** Levels of halving where a reading comes near its limit between samples and turns back. */
const deepest = 6

interface Sample {
  /** ln of the factor. */
  x: number
  /** How far each reading is from its limit, positive where it is met; infinite where the verdict has no figure to it. */
  room: number[]
}

/**
 * For each requirement the factors on the overall gain for which it is met, and their intersection: how much room there is about the present gain.
 *
 * Sampled on a logarithmic scale between the gains at which stability changes (known exactly), refined where a reading turns back near its limit,
 * every edge bisected to 1e-6.
 * @param gains the present ones; all are multiplied (zero and pole of a lead or lag stay)
 */
export function gainWindow(...asked: Parameters<typeof gainWindowSteps>): GainWindow {
  const steps = gainWindowSteps(...asked)
  for (;;) {
    const step = steps.next()
    if (step.done) return step.value
  }
}

/** A part of the work, which pauses before every sample; answered with `true` it gives up. */
type Steps<Result> = Generator<void, Result, boolean | undefined>

type Sampler = (x: number) => Steps<Sample>

/**
 * `gainWindow` sample by sample, for a caller who has other things to do in between.
 * @throws TooMuchWorkError where it was told to give up
 */
export function* gainWindowSteps(
  model: LoopModel, controller: Controller, gains: Gains, requirements: readonly Requirement[], options: ReadingOptions = { amplitude: 1, settlingBandPercent: 2 },
): Steps<GainWindow> {
  const sampleAt: Sampler = function* (x) {
    if (yield) throw new TooMuchWorkError('the room for the gain of this loop takes too long to compute')
    const work = { pieces: piecesPerSample }
    return { x, room: roomAt(() => closeLoop(model, controller, scaleGains(gains, Math.exp(x)), work), requirements, options) }
  }
  const samples = yield* refineTurns(yield* all(firstPlaces(model, controller, gains), sampleAt), sampleAt)
  const byRequirement: GainWindow['byRequirement'] = []
  for (const [index, requirement] of requirements.entries()) byRequirement.push({ ...requirement, intervals: yield* intervalsOf(samples, index, sampleAt) })
  const window = byRequirement.reduce<Interval[]>((common, { intervals }) => intersect(common, intervals), [domain])
  return { window, byRequirement, tightest: tightestOf(window, byRequirement) }
}

function* all(places: readonly number[], sampleAt: Sampler): Steps<Sample[]> {
  const samples: Sample[] = []
  for (const x of places) samples.push(yield* sampleAt(x))
  return samples
}

function roomAt(close: () => ClosedLoop, requirements: readonly Requirement[], options: ReadingOptions): number[] {
  try {
    const closed = close()
    const readings = readAll(closed, stepOf(closed, options.amplitude), options)
    return judge(requirements, readings, closed.poles, closed.stable).map(({ actual, limit, value, met }) => {
      const room = actual === null ? Infinity : Math.abs(limit === 'at-most' ? value - actual : actual - value)
      return met ? room : -room
    })
  }
  catch (error) {
    // An algebraic loop, or numbers out of range: nothing is met there.
    if (error instanceof NoAnswerError || error instanceof RangeError) return requirements.map(() => -Infinity)
    throw error
  }
}

/** null where following it to its end would take too long: it then meets nothing that limits it in time, which errs on the safe side. */
function stepOf(closed: ClosedLoop, amplitude: number): LoopResponse | null {
  try {
    return closed.stable ? closed.respondTo('reference-step', amplitude) : null
  }
  catch (error) {
    if (error instanceof TooMuchWorkError) return null
    throw error
  }
}

/** An even grid in ln of the factor, with a place just on either side of each gain at which stability changes. */
function firstPlaces(model: LoopModel, controller: Controller, gains: Gains): number[] {
  const [from, to] = [Math.log(domain[0]), Math.log(domain[1])]
  const count = Math.round((to - from) / Math.LN10 * perDecade)
  const places = Array.from({ length: count + 1 }, (_, n) => from + (to - from) * n / count)
  const present = 'k' in gains ? gains.k : 1
  for (const { gain } of crossingsOf(model, controller, gains)) {
    const x = Math.log(gain / present)
    if (x > from && x < to) places.push(x - 1e-9, x + 1e-9)
  }
  return [...places, 0].sort((a, b) => a - b)
}

function crossingsOf(model: LoopModel, controller: Controller, gains: Gains) {
  try {
    return imaginaryAxisCrossings(openLoop(model, controller, gains))
  }
  catch (error) {
    if (error instanceof NoAnswerError || error instanceof RangeError) return []
    throw error
  }
}

/** Halves the pieces beside a sample at which some reading is nearer to its limit than at both neighbours, all on one side. */
function* refineTurns(samples: Sample[], sampleAt: Sampler): Steps<Sample[]> {
  let refined = samples
  for (let level = 0; level < deepest; level++) {
    const halves = new Set<number>()
    for (let i = 1; i + 1 < refined.length; i++) {
      const [before, here, after] = [refined[i - 1]!, refined[i]!, refined[i + 1]!]
      if (!here.room.some((room, n) => turnsNear(before.room[n]!, room, after.room[n]!))) continue
      halves.add((before.x + here.x) / 2)
      halves.add((here.x + after.x) / 2)
    }
    if (halves.size === 0) break
    refined = [...refined, ...yield* all([...halves], sampleAt)].sort((a, b) => a.x - b.x)
  }
  return refined
}

function turnsNear(before: number, here: number, after: number): boolean {
  if (!Number.isFinite(here) || Math.sign(before) !== Math.sign(here) || Math.sign(after) !== Math.sign(here)) return false
  const [a, b, c] = [Math.abs(before), Math.abs(here), Math.abs(after)]
  // A parabola through the three would have to reach the limit for the refinement to be worth while.
  return b < a && b < c && b < (a - b) + (c - b)
}

function* intervalsOf(samples: Sample[], index: number, sampleAt: Sampler): Steps<Interval[]> {
  const isMet = ({ room }: Sample) => room[index]! >= 0
  const intervals: Interval[] = []
  let from: number | null = null
  for (const [i, sample] of samples.entries()) {
    const before = samples[i - 1]
    if (isMet(sample) && from === null) from = before ? Math.exp(yield* edgeBetween(before, sample, index, sampleAt)) : domain[0]
    if (!isMet(sample) && from !== null && before) {
      intervals.push([from, Math.exp(yield* edgeBetween(sample, before, index, sampleAt))])
      from = null
    }
  }
  if (from !== null) intervals.push([from, domain[1]])
  return intervals
}

/**
 * The edge between a sample at which the requirement is broken and one at which it is met, on the met side. The secant through the two leads there
 * fast; every third step halves, since a reading may jump (a settling time does, by one swing of the response).
 */
function* edgeBetween(brokenStart: Sample, metStart: Sample, index: number, sampleAt: Sampler): Steps<number> {
  let [broken, met] = [brokenStart, metStart]
  const close = edgeAccuracy / 2
  for (let step = 1; Math.abs(met.x - broken.x) > close; step++) {
    const way = met.x - broken.x
    const [lacking, spare] = [-broken.room[index]!, met.room[index]!]
    const share = step % 3 === 0 || !Number.isFinite(lacking) || !Number.isFinite(spare) ? 0.5 : lacking / (lacking + spare)
    // Never onto an end: a step as short as the accuracy asked for closes the bracket once the secant has arrived.
    const least = 0.45 * close / Math.abs(way)
    const here = yield* sampleAt(broken.x + way * Math.min(1 - least, Math.max(least, share)))
    if (here.room[index]! >= 0) met = here
    else broken = here
  }
  return met.x
}

function intersect(a: readonly Interval[], b: readonly Interval[]): Interval[] {
  return a.flatMap(([from, to]) => b.flatMap(([start, end]): Interval[] => {
    const both: Interval = [Math.max(from, start), Math.min(to, end)]
    return both[0] < both[1] ? [both] : []
  }))
}

/** The requirements that end the room about the present gain (or the nearest room), below and above; null where the domain ends it. */
function tightestOf(window: readonly Interval[], byRequirement: GainWindow['byRequirement']): GainWindow['tightest'] {
  const distance = ([from, to]: Interval) => from > 1 ? Math.log(from) : to < 1 ? -Math.log(to) : 0
  const [room] = [...window].sort((a, b) => distance(a) - distance(b))
  if (!room) return { below: null, above: null }
  const ending = (side: 0 | 1): ReadingName | null => room[side] === domain[side]
    ? null
    : byRequirement.find(({ intervals }) => intervals.some(interval => interval[side] === room[side]))?.reading ?? null
  return { below: ending(0), above: ending(1) }
}
