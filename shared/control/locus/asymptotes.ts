import { sumOfRoots, leading } from '../../numerics/polynomial'
import { relativeDegree } from '../transfer-function'
import type { DelayedFunction, LoopAnalysis } from '../types'

/**
 * Where the branches to infinity go: centroid (sum of poles - sum of zeros)/n and angles (180 + k 360)/n degrees, n the relative degree; k 360/n
 * where the gain of L0 is negative. Angles rise from 0 up to 360. null where no branch goes to infinity, and with a
 * dead time, where infinitely many go out to the right along horizontals 2 pi/deadTime apart.
 */
export function asymptotes(open: DelayedFunction): LoopAnalysis['asymptotes'] {
  const n = relativeDegree(open)
  if (n <= 0 || open.deadTime > 0) return null
  const centroid = (sumOfRoots(open.denominator) - sumOfRoots(open.numerator)) / n
  const first = leading(open.numerator) / leading(open.denominator) > 0 ? 180 : 0
  return { centroid: centroid + 0, anglesDeg: Array.from({ length: n }, (_, k) => (first + 360 * k) / n) }
}
