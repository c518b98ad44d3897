import type { Complex } from '../../numerics/complex'
import { distance } from '../../numerics/complex'
import { gatherRepeated, repeat, type RepeatedRoot } from '../../numerics/multiple-roots'
import * as polynomial from '../../numerics/polynomial'
import { roots } from '../../numerics/roots'
import type { DelayedFunction } from '../types'

/** L0 = gain prod(s - zeros)/prod(s - poles) e^(-s deadTime), beside its coefficients. */
export interface FactoredLoop extends DelayedFunction {
  /** Ratio of the leading coefficients, with its sign. */
  gain: number
  /** With repetitions; repeated roots are exactly equal. */
  poles: Complex[]
  zeros: Complex[]
  distinctPoles: RepeatedRoot[]
  distinctZeros: RepeatedRoot[]
}

/** A pole and a zero this close (relative to their size) cancel: rounding of coefficients may have parted them. */
export const cancellationWidth = 1e-9
/** At this distance they are one point on any screen, though figures still feel the difference. */
export const invisibleWidth = 1e-6

/** Poles, zeros and gain of L0. */
export function factor({ numerator, denominator, deadTime }: DelayedFunction): FactoredLoop {
  const distinctPoles = gatherRepeated(denominator, roots(denominator))
  const distinctZeros = gatherRepeated(numerator, roots(numerator))
  return {
    numerator,
    denominator,
    deadTime,
    gain: polynomial.leading(numerator) / polynomial.leading(denominator),
    poles: repeat(distinctPoles),
    zeros: repeat(distinctZeros),
    distinctPoles,
    distinctZeros,
  }
}

/**
 * The loop without poles that a zero takes away. Such a pole is a closed-loop root at every gain: it belongs to the locus as a point and would
 * only blur the conditions for the rest.
 */
export function cancelCommon(loop: FactoredLoop, width: number): { loop: FactoredLoop, cancelled: Complex[] } {
  const zeros = [...loop.zeros]
  const cancelled: Complex[] = []
  const poles = loop.poles.filter((pole) => {
    const i = zeros.findIndex(zero => distance(zero, pole) <= width * Math.hypot(pole.re, pole.im))
    if (i < 0) return true
    zeros.splice(i, 1)
    cancelled.push(pole)
    return false
  })
  if (cancelled.length === 0) return { loop, cancelled }
  const reduced = factor({
    numerator: polynomial.fromRoots(symmetric(zeros), polynomial.leading(loop.numerator)),
    denominator: polynomial.fromRoots(symmetric(poles), polynomial.leading(loop.denominator)),
    deadTime: loop.deadTime,
  })
  return { loop: reduced, cancelled }
}

/** Removing one of two nearly equal places may part exact mirrors by a last digit; the upper ones decide. */
function symmetric(places: Complex[]): Complex[] {
  return places.filter(place => place.im >= 0)
    .flatMap(place => place.im === 0 ? [place] : [place, { re: place.re, im: -place.im }])
}
