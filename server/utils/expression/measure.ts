import { baseDimension, combineDimensions, type Dimension, dimensionless, isSameDimension } from './dimension'

/**
 * What is known of the unit of a part of a formula:
 * - `known`: it rests on parameters with units; `written` is the unit as it was typed, where the part is one parameter;
 * - `bare`: numbers and s alone. Beside something known a number has no unit and s has 1/s; among themselves people add them as they please (s + 3);
 * - `unknown`: it rests on a parameter without a unit, or on such a sum; anything may be added to it.
 */
export type Measure =
  | { kind: 'known', dimension: Dimension, written?: string }
  | { kind: 'bare', dimension: Dimension }
  | { kind: 'unknown' }

export const unknownMeasure: Measure = { kind: 'unknown' }
export const measureOfNumber: Measure = { kind: 'bare', dimension: dimensionless }
/** s counts as 1/s. */
export const measureOfS: Measure = { kind: 'bare', dimension: baseDimension('s', -1) }

/** a times b, or with power -1 a divided by b. */
export function measureOfProduct(a: Measure, b: Measure, power: 1 | -1): Measure {
  if (a.kind === 'unknown' || b.kind === 'unknown') return unknownMeasure
  return bounded(a.kind === 'known' || b.kind === 'known' ? 'known' : 'bare', combineDimensions(a.dimension, b.dimension, power))
}

export function measureOfPower(a: Measure, exponent: number): Measure {
  return a.kind === 'unknown' ? a : bounded(a.kind, combineDimensions(dimensionless, a.dimension, exponent))
}

/** Beyond this no exponent means anything. */
const largestExponent = 100

function bounded(kind: 'known' | 'bare', dimension: Dimension): Measure {
  return dimension.every(exponent => Math.abs(exponent) <= largestExponent) ? { kind, dimension } : unknownMeasure
}

/** What a sum of both is in, or null where unlike terms would be added. What is known of one term holds for the other. */
export function measureOfSum(a: Measure, b: Measure): Measure | null {
  if (a.kind === 'unknown') return b.kind === 'known' ? b : a
  if (b.kind === 'unknown') return a.kind === 'known' ? a : b
  if (isSameDimension(a.dimension, b.dimension)) return a.kind === 'known' ? a : b
  return a.kind === 'bare' && b.kind === 'bare' ? unknownMeasure : null
}

export function hasUnit(a: Measure): boolean {
  return a.kind === 'known' && !isSameDimension(a.dimension, dimensionless)
}
