import type { Complex } from '../../numerics/complex'
import * as complex from '../../numerics/complex'
import { findRoot } from '../../numerics/find-root'
import { delayFactor } from '../delay/quasi-polynomial'
import { refine, type ScaledLoop } from './scaled-loop'

/** The line, and how far up it, at which branches that come from the far left enter the drawing, in extents. */
export const leftEdge = -4
const highest = 6
/** Turn (radians) of the angle between places of the grid. */
const turn = 0.1
const mostPlaces = 4000
/** Entrances drawn; with a long dead time they would crowd the picture. */
const mostEntrances = 12

/** A root of the delay's chain on its way in. */
export interface Entrance { place: Complex, k: number }

/**
 * Where the branches that a dead time brings in from Re s = -infinity cross a vertical line left of the figure: by rising gain, upper half only. The angle along the
 * line turns mainly by the delay, and each time that it passes 180 degrees a branch comes in.
 */
export function entrances(loop: ScaledLoop): Entrance[] {
  if (loop.deadTime === 0) return []
  const at = (y: number): Complex => ({ re: leftEdge, im: y })
  const lack = (y: number) => complex.arg(complex.negate(ratioAt(loop, at(y))))
  const found: Entrance[] = []
  const enter = (y: number) => {
    const k = 1 / complex.abs(ratioAt(loop, at(y)))
    const root = refine(loop, k, leftEdge, y, y === 0)
    // Branches of the rational part may leave across the same line.
    if (root !== null && root.velocityRe > 0 && Number.isFinite(k) && k > 0) found.push({ place: { re: root.re, im: root.im }, k })
  }
  if (ratioAt(loop, at(0)).re < 0) enter(0)
  const step = Math.max(Math.min(turn / loop.deadTime, turn), highest / mostPlaces)
  for (let y = step; y <= highest; y += step) {
    const [before, here] = [lack(y - step), lack(y)]
    if (y - step > 0 && Math.sign(before) * Math.sign(here) === -1 && Math.abs(before - here) < Math.PI) enter(findRoot(lack, y - step, y))
  }
  return found.sort((a, b) => a.k - b.k).slice(0, mostEntrances)
}

/** sign Z e^(-z deadTime)/P. */
function ratioAt({ poles, zeros, sign, deadTime }: ScaledLoop, z: Complex): Complex {
  let value = complex.scale(delayFactor(z, deadTime), sign)
  for (let i = 0; i < Math.max(poles.length, zeros.length); i++) {
    if (i < zeros.length) value = complex.multiply(value, complex.subtract(z, zeros[i]!))
    if (i < poles.length) value = complex.divide(value, complex.subtract(z, poles[i]!))
  }
  return value
}
