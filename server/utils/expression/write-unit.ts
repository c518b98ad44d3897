import { baseSymbols, combineDimensions, type Dimension, dimensionless, isSameDimension } from './dimension'

/** Units and their exponents, in the order in which they are written. */
export type UnitProduct = ReadonlyMap<string, number>

/** Table 4 of the SI brochure (BIPM, 9th edition), as far as quantities of motion axes use it: kg, m, s, A. */
const derived = {
  V: [1, 2, -3, -1], ohm: [1, 2, -3, -2], N: [1, 1, -2, 0], W: [1, 2, -3, 0], H: [1, 2, -2, -2], F: [-1, -2, 4, 2],
} as const satisfies Record<string, readonly number[]>

const order = ['kg', 'N', 'W', 'V', 'A', 'ohm', 'H', 'F', 'm', 's', 'K', 'cd', 'mol', 'bit']

/** Derived units that are tried, with their exponents, before the rest is written in base units. */
const attempts: readonly (readonly [keyof typeof derived, number][])[] = [
  [],
  ...(['V', 'ohm', 'N', 'W'] as const).flatMap(symbol => [1, -1, 2, -2].map(power => [[symbol, power]] as [typeof symbol, number][])),
  [['V', 1], ['N', -1]], [['N', 1], ['V', -1]], [['ohm', 1], ['N', -1]], [['N', 1], ['ohm', -1]],
]

/**
 * A dimension as the plainest product of units that an engineer would write.
 *
 * @param isGain it belongs to a gain, from something measured to something that drives: driving quantities belong above the line
 */
export function simplestUnits(dimension: Dimension, isGain = false): UnitProduct {
  for (const symbol of ['H', 'F'] as const) {
    if (isSameDimension(dimension, dimensionOf(symbol))) return new Map([[symbol, 1]])
  }
  const products = attempts.map((attempt) => {
    const rest = attempt.reduce<Dimension>((left, [symbol, power]) => combineDimensions(left, dimensionOf(symbol), -power), dimension)
    return new Map<string, number>([...attempt, ...baseSymbols.map((symbol, index) => [symbol, rounded(rest[index]!)] as const).filter(([, power]) => power !== 0)])
  })
  const effort = (product: UnitProduct) => effortToRead(product) + (isGain && drivesFromBelow(product) ? 3 : 0)
  return products.reduce((best, product) => effort(product) < effort(best) ? product : best)
}

/** The product times a unit to a power. */
export function timesUnit(product: UnitProduct, symbol: string, power: number): UnitProduct {
  return new Map([...product, [symbol, (product.get(symbol) ?? 0) + power]])
}

/** Such as `N m s`, `V/m`, `A/(m s)`, `1/s`; empty for a plain number. */
export function writeUnits(product: UnitProduct): string {
  const factors = order.flatMap(symbol => product.get(symbol) ? [{ symbol, power: product.get(symbol)! }] : [])
  const write = (part: typeof factors) => part.map(({ symbol, power }) => Math.abs(power) === 1 ? symbol : `${symbol}^${Math.abs(power)}`).join(' ')
  const [above, below] = [factors.filter(({ power }) => power > 0), factors.filter(({ power }) => power < 0)]
  if (below.length === 0) return write(above)
  return `${write(above) || '1'}/${below.length === 1 ? write(below) : `(${write(below)})`}`
}

export function writeDimension(dimension: Dimension): string {
  return writeUnits(simplestUnits(dimension))
}

function dimensionOf(symbol: keyof typeof derived): Dimension {
  return [...derived[symbol], ...dimensionless.slice(derived[symbol].length)]
}

const rounded = (power: number) => Number(power.toFixed(6))

/**
 * How hard a product is to read: every symbol and every further power counts, powers of time most. Mixtures that are right in dimension and say
 * nothing count extra: V s/m as N/A, m/s^2 as N/kg, A as W/V.
 */
function effortToRead(product: UnitProduct): number {
  const ofOne = (symbol: string, size: number) => (symbol === 'kg' ? 2.2 : 1) * Math.min(1, size) + (symbol === 'm' ? 0.5 : 1.5) * Math.max(0, size - 1)
  const has = (...symbols: string[]) => symbols.some(symbol => product.has(symbol))
  return [...product].reduce((sum, [symbol, power]) => sum + ofOne(symbol, Math.abs(power)), 0)
    + (has('kg') && has('N', 'W', 'V', 'ohm') ? 3 : 0)
    + (has('W') && has('V', 'A', 'ohm') ? 3 : 0)
    + (has('N') && has('V', 'A', 'ohm') ? 1.5 : 0)
}

function drivesFromBelow(product: UnitProduct): boolean {
  const powers = ['V', 'A', 'N', 'W', 'ohm'].flatMap(symbol => product.get(symbol) ?? [])
  return powers.length > 0 && powers.every(power => power < 0)
}
