import { evaluateAccurately } from '../numerics/compensated'
import { abs, type Complex } from '../numerics/complex'
import * as polynomial from '../numerics/polynomial'
import { rationalLoop, type ClosedLoop } from './closed-loop'
import type { LoopFunctions } from './controller'
import { readAll, type ReadingOptions } from './readings'
import { onAxis } from './stability'
import type { Readings, TransferFunction, UncertainFigure } from './types'

/** Relative rounding that a coefficient of the closed loop may carry on its way from what was typed, with room. */
const rounding = 2 ** -51
/** Coefficients are moved by this much to see which figures move with them: a few times their rounding. */
const trialMove = 2 ** -49
/** A root that may lie this far (relative) from where it is told is told as uncertain. */
const visible = 1e-5
/** Rounding that reaches this share of a figure's ingredients is worth a trial; below it no figure can lose its stated accuracy. */
const suspicious = 1e-10

/** Figures that exist in a stable loop only: as sure as its stability. */
const ofStableLoops: readonly (keyof Readings)[] = [
  'finalValue', 'overshootPercent', 'peakTime', 'riseTime', 'settlingTime', 'steadyStateErrorStep', 'steadyStateErrorRamp', 'peakEffort', 'bandwidth',
]

/**
 * The figures of a solution that may not be good to the accuracy of docs/method.md, because the rounding of the loop's own coefficients moves them further.
 *
 * Roots: each may lie anywhere in a disc within which rounding can make the characteristic polynomial vanish (a root of multiplicity m: radius about
 * eps^(1/m)). Stability is uncertain where such a disc meets the imaginary axis. Readings: only where roots, cancellations or margins look sensitive, all are
 * computed anew for coefficients moved by a few roundings, two ways, and those that move by more than their accuracy are named.
 * For a rational loop; of a loop with dead time, sampling or a limit nothing is told here.
 * Source: J. H. Wilkinson, "Rounding errors in algebraic processes" (1963), conditioning of roots.
 */
export function uncertainFigures(closed: ClosedLoop, readings: Readings, options: ReadingOptions): UncertainFigure[] {
  const { functions, poles, stable } = closed
  const radii = poles.map((_, i) => radiusAbout(functions, poles, i))
  const uncertain = new Set<UncertainFigure>()
  if (poles.some((pole, i) => radii[i]! > visible * abs(pole))) uncertain.add('closedLoopPoles')
  if (poles.some((pole, i) => Math.abs(pole.re) < Math.max(radii[i]!, onAxis * abs(pole))) && !isEvenOrOdd(functions.characteristic)) {
    uncertain.add('stable')
    for (const name of ofStableLoops) uncertain.add(name)
  }
  const sensitive = poles.some((pole, i) => radii[i]! > suspicious * Math.abs(pole.re)) || cancels(functions) || losesDigits(functions.loop, readings)
  if (sensitive) for (const name of movedReadings(functions, stable, readings, options)) uncertain.add(name)
  return [...uncertain]
}

/** How far rounding may move a root: the radius r with r prod max(r, distance to each other root) = noise of p at the root / leading coefficient. */
function radiusAbout({ loop, characteristic }: LoopFunctions, poles: readonly Complex[], index: number): number {
  const pole = poles[index]!
  const size = abs(pole)
  const noise = rounding * (polynomial.evaluateSize(loop.denominator, size) + polynomial.evaluateSize(loop.numerator, size)) + abs(evaluateAccurately(characteristic, pole))
  if (noise === 0) return 0
  const distances = poles.filter((_, i) => i !== index).map(other => Math.log(Math.hypot(other.re - pole.re, other.im - pole.im))).sort((a, b) => b - a)
  // Logarithms: products of forty distances leave the range of numbers. From all roots inside the disc to none, until they fit.
  let rest = Math.log(noise / Math.abs(polynomial.leading(characteristic)))
  let radius = rest / poles.length
  for (let outside = 0; outside < distances.length && distances[outside]! > radius; outside++) {
    rest -= distances[outside]!
    radius = rest / (poles.length - 1 - outside)
  }
  return Math.exp(radius)
}

/** Exactly even or odd in s, as that of undamped loops is: its roots lie in pairs about the origin, on the axis for certain, and no rounding moves them off. */
function isEvenOrOdd(p: polynomial.Polynomial): boolean {
  return p.every((coefficient, i) => i % 2 === 0 || coefficient === 0)
}

/** Whether little is left of 1 + L at rest or at infinity, against what was added. */
function cancels({ loop: { numerator, denominator } }: LoopFunctions): boolean {
  const lost = (power: number) => {
    const [a, b] = [polynomial.coefficientOf(denominator, power), polynomial.coefficientOf(numerator, power)]
    return rounding * (Math.abs(a) + Math.abs(b)) > suspicious * 1e-2 * Math.abs(a + b) && a + b !== 0
  }
  return lost(0) || lost(polynomial.degree(denominator))
}

/** Whether N or D at a crossover is small against its terms. */
function losesDigits(loop: TransferFunction, { gainCrossover, phaseCrossover }: Readings): boolean {
  return [gainCrossover, phaseCrossover].some(w => w !== null && [loop.numerator, loop.denominator].some((p) => {
    return rounding * polynomial.evaluateSize(p, w) > suspicious * abs(polynomial.evaluateComplex(p, { re: 0, im: w }))
  }))
}

function movedReadings(functions: LoopFunctions, stable: boolean, readings: Readings, options: ReadingOptions): (keyof Readings)[] {
  const trials = [1, 2].map((trial) => {
    try {
      const moved = rationalLoop(moveCoefficients(functions, trial))
      return moved.stable === stable ? readAll(moved, moved.respondTo('reference-step', options.amplitude), options) : null
    }
    catch (error) {
      if (error instanceof RangeError) return null
      throw error
    }
  })
  const names = Object.keys(readings) as (keyof Readings)[]
  return names.filter(name => trials.some(trial => trial === null ? ofStableLoops.includes(name) : !agree(name, readings, trial)))
}

/**
 * The loop with every coefficient moved up or down by the trial's pattern, the same for the same power wherever it stands; what is exactly zero stays so,
 * and the error stays what the loop leaves of the reference.
 */
function moveCoefficients({ loop, controller, reference, effort, disturbance, deadTime }: LoopFunctions, trial: number): LoopFunctions {
  const move = (p: number[], kind: number) => p.map((c, i) => c * (1 + (((p.length - 1 - i) * 0x9E37 + trial * 0x79B9 + kind * 0x5BD1) >> 3 & 1 ? trialMove : -trialMove)))
  const [numerator, denominator] = [move(loop.numerator, 0), move(loop.denominator, 1)]
  const characteristic = polynomial.add(denominator, numerator)
  const through = move(reference.numerator, 0)
  const over = (top: number[]) => ({ numerator: top, denominator: characteristic })
  return {
    deadTime,
    loop: { numerator, denominator },
    controller,
    reference: over(through),
    effort: over(move(effort.numerator, 1)),
    disturbance: over(move(disturbance.numerator, 0)),
    error: over(polynomial.subtract(characteristic, through)),
    characteristic,
  }
}

/** Relative accuracies of docs/method.md, and the size below which the deviation counts absolutely. */
const accuracy: Record<Exclude<keyof Readings, 'gainMargin'>, readonly [relative: number, least: number]> = {
  finalValue: [1e-10, 0], overshootPercent: [1e-8, 100], peakTime: [1e-7, 0], riseTime: [1e-7, 0], settlingTime: [1e-7, 0],
  steadyStateErrorStep: [1e-10, 1], steadyStateErrorRamp: [1e-10, 0], peakEffort: [1e-7, 0], gainMarginDb: [1e-8, 1], phaseMarginDeg: [1e-8, 1],
  gainCrossover: [1e-8, 0], phaseCrossover: [1e-8, 0], delayMargin: [1e-7, 0], sensitivityPeak: [1e-8, 0], bandwidth: [1e-8, 0],
}

function agree(name: keyof Readings, was: Readings, is: Readings): boolean {
  if (name === 'gainMargin') return isClose(was.gainMargin.upper, is.gainMargin.upper, 1e-8, 0) && isClose(was.gainMargin.lower, is.gainMargin.lower, 1e-8, 0)
  // A margin of next to nothing is as good as the phase it is made of.
  const least = name === 'delayMargin' ? 0.01 / (was.gainCrossover ?? 1) : accuracy[name][1]
  return isClose(was[name], is[name], accuracy[name][0], least)
}

function isClose(a: number | null, b: number | null, relative: number, least: number): boolean {
  if (a === null || b === null) return a === b
  return Math.abs(a - b) <= relative * Math.max(Math.abs(a), least)
}
