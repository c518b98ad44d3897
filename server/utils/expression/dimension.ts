/** Symbols of the SI base units, in the order in which a dimension lists its exponents; the bit stands beside them. */
export const baseSymbols = ['kg', 'm', 's', 'A', 'K', 'cd', 'mol', 'bit'] as const

/** Exponents of the base units. An angle is a ratio of lengths and has none, as in the SI brochure (BIPM, 9th edition): rad = 1. */
export type Dimension = readonly number[]

export const dimensionless: Dimension = baseSymbols.map(() => 0)

/** A base unit to a power. */
export function baseDimension(symbol: typeof baseSymbols[number], power = 1): Dimension {
  return baseSymbols.map(base => base === symbol ? power : 0)
}

/** a times b to a power. */
export function combineDimensions(a: Dimension, b: Dimension, power = 1): Dimension {
  return a.map((exponent, index) => exponent + power * b[index]!)
}

/** Roots in a formula leave exponents that are fractions, right to the last bits only. */
const exponentTolerance = 1e-9

export function isSameDimension(a: Dimension, b: Dimension): boolean {
  return a.every((exponent, index) => Math.abs(exponent - b[index]!) <= exponentTolerance)
}
