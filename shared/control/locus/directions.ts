import { arg, subtract, type Complex } from '../../numerics/complex'
import type { RepeatedRoot } from '../../numerics/multiple-roots'
import { toDegrees, wrapAngle } from '../angle'
import type { LoopAnalysis } from '../types'
import type { FactoredLoop } from './factored-loop'

/**
 * Angles of departure from every pole, m of them at an m-fold one, in degrees in (-180, 180].
 * Near a pole p, (s - p)^m = -K gain e^(-p deadTime) prod(p - zeros)/prod(p - other poles).
 */
export function departures(loop: FactoredLoop): LoopAnalysis['departures'] {
  return loop.distinctPoles.flatMap(pole => anglesAt(pole, loop.gain, loop.distinctZeros, loop.distinctPoles, -loop.deadTime)
    .map(angleDeg => ({ pole: { ...pole.place }, angleDeg })))
}

/** Angles at which branches lie as seen from the zero they end on, in degrees in (-180, 180]; the same law with poles and zeros exchanged. */
export function arrivals(loop: FactoredLoop): LoopAnalysis['arrivals'] {
  return loop.distinctZeros.flatMap(zero => anglesAt(zero, loop.gain, loop.distinctPoles, loop.distinctZeros, loop.deadTime)
    .map(angleDeg => ({ zero: { ...zero.place }, angleDeg })))
}

function anglesAt(at: RepeatedRoot, gain: number, opposite: RepeatedRoot[], alike: RepeatedRoot[], deadTime: number): number[] {
  const seen = (others: RepeatedRoot[]) => others
    .filter(other => other !== at)
    .reduce((sum, other) => sum + other.multiplicity * angleFrom(other.place, at.place), 0)
  const total = (gain > 0 ? Math.PI : 0) + seen(opposite) - seen(alike) + at.place.im * deadTime
  return Array.from({ length: at.multiplicity }, (_, k) => toDegrees(wrapAngle((wrapAngle(total) + 2 * Math.PI * k) / at.multiplicity)))
    .sort((a, b) => a - b)
}

/** As seen from a real place the two of a pair cancel exactly, so both are left out. */
function angleFrom(other: Complex, at: Complex): number {
  return at.im === 0 && other.im !== 0 ? 0 : arg(subtract(at, other))
}
