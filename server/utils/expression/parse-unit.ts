import { unit as mathUnit } from 'mathjs'
import { baseDimension, combineDimensions, type Dimension, dimensionless } from './dimension'

/** What one of the unit counts for in SI units, and its dimension. */
export interface ParsedUnit {
  factor: number
  dimension: Dimension
}

/** What is wrong with the text of a unit, in one sentence. */
export class UnitError extends Error {}

/** Signs that people type or paste, as the plain ones. */
const plainSigns: readonly (readonly [RegExp, string])[] = [
  [/[·×⋅∙•]/g, '*'], [/[÷∕⁄]/g, '/'], [/[−–]/g, '-'], [/[µμ]/g, 'u'], [/[ΩΩ]|Ohm/g, 'ohm'], [/°(?=[CF])/g, 'deg'], [/°/g, ' deg '],
]
const raised = '⁰¹²³⁴⁵⁶⁷⁸⁹'

const number: ParsedUnit = { factor: 1, dimension: dimensionless }
const turn: ParsedUnit = { factor: 2 * Math.PI, dimension: dimensionless }
const turnPerMinute: ParsedUnit = { factor: 2 * Math.PI / 60, dimension: baseDimension('s', -1) }

/** Units of drives that mathjs does not know; increments of an encoder are plain numbers. */
const ownUnits: ReadonlyMap<string, ParsedUnit> = new Map([
  ['count', number], ['counts', number], ['inc', number], ['incs', number], ['increment', number], ['increments', number],
  ['%', { factor: 0.01, dimension: dimensionless }], ['rev', turn], ['revs', turn], ['turn', turn], ['turns', turn],
  ['rpm', turnPerMinute], ['krpm', { ...turnPerMinute, factor: 1000 * turnPerMinute.factor }],
])

/** Products that are often written as one word: Nm, mNm, Ncm, Nms, Vs, As, kgm; a power belongs to the last of them. */
const joined = /^([kMmu]?[NVAWJ])(mm|cm|m)?(s)?$|^(kg)(mm|cm|m)$|^(g)(mm|cm)$/

const figure = '[+-]?\\d+(?:\\.\\d+)?(?:[eE][+-]?\\d+)?'
const patterns = {
  operator: /^\s*([*/]|[.-](?=[A-Za-z(]))\s*/,
  leftOut: /^\s*(?=[A-Za-z%(\d])/,
  number: /^\d[\d.]*(?:[eE][+-]?\d+)?/,
  word: /^(?:[A-Za-z]+|%)/,
  power: new RegExp(`^\\s*\\^\\s*(?:\\(\\s*(${figure})\\s*\\)|(${figure}))|^(-?[1-9])(?!\\d)`),
}

/** Beyond this a power is a slip of the hand. */
const largestPower = 9

interface Reading {
  /** What is still to be read. */
  rest: string
}

/**
 * The unit that a text tells, as engineers write it: `kg m^2`, `kg·m²`, `Nm/A`, `N*m*s/rad`, `V s/rad`, `rad/(s V)`, `1/s`, `min^-1`, `ms`, `Ω`, `%`.
 * The words are looked up in mathjs; nothing is evaluated. Work is bounded by the length of the text.
 *
 * @throws UnitError with the word that is not known, or what else is wrong
 */
export function parseUnit(text: string): ParsedUnit {
  if (text.trim() === '-') return number
  const reading: Reading = { rest: plain(text).trim() }
  const unit = readProduct(reading)
  if (reading.rest !== '') throw new UnitError(`"${firstSign(reading)}" has no place here in a unit`)
  if (!Number.isFinite(unit.factor) || unit.factor === 0) throw new UnitError('this unit is beyond what can be computed')
  return unit
}

function plain(text: string): string {
  const signs = plainSigns.reduce((sofar, [sign, meant]) => sofar.replace(sign, meant), text)
  return signs.replace(/[⁺⁻⁰¹²³⁴⁵⁶⁷⁸⁹]+/g, power => `^${[...power].map(sign => sign === '⁻' ? '-' : sign === '⁺' ? '+' : raised.indexOf(sign)).join('')}`)
}

function readProduct(reading: Reading): ParsedUnit {
  let product = readFactor(reading)
  let divided = false
  for (;;) {
    const operator = take(reading, patterns.operator)?.[1] ?? (take(reading, patterns.leftOut) ? '*' : null)
    if (operator === null) return product
    // The SI brochure forbids it (section 5.2), and readers disagree: V/rad s.
    if (divided && operator !== '/') throw new UnitError('what follows the "/" can be read in two ways: put it in parentheses, as in V/(rad s)')
    divided ||= operator === '/'
    product = combine(product, readFactor(reading), operator === '/' ? -1 : 1)
  }
}

function readFactor(reading: Reading): ParsedUnit {
  if (take(reading, /^\(\s*/)) {
    const inner = readProduct(reading)
    if (!take(reading, /^\s*\)/)) throw new UnitError('a ")" is missing in the unit')
    return combine(number, inner, readPower(reading))
  }
  const figures = take(reading, patterns.number)?.[0]
  if (figures === '1') return number
  if (figures !== undefined) throw new UnitError(`${figures} belongs to the value: a unit holds no number but its powers`)
  const word = take(reading, patterns.word)?.[0]
  if (word === undefined) throw new UnitError(reading.rest === '' ? 'the unit breaks off' : `"${firstSign(reading)}" has no place here in a unit`)
  const power = readPower(reading)
  const parts = partsOf(word)
  return parts.reduce((product, part, index) => combine(product, part, index === parts.length - 1 ? power : 1), number)
}

function readPower(reading: Reading): number {
  const match = take(reading, patterns.power)
  if (match === null) return 1
  const power = Number(match[1] ?? match[2] ?? match[3])
  if (!Number.isInteger(power) || Math.abs(power) > largestPower) throw new UnitError(`a power in a unit is a whole number up to ${largestPower}`)
  return power
}

function partsOf(word: string): ParsedUnit[] {
  const unit = lookUp(word)
  if (unit !== null) return [unit]
  const parts = (joined.exec(word)?.slice(1) ?? []).filter(part => part !== undefined)
  const units = parts.map(lookUp).filter(part => part !== null)
  if (units.length === 0 || units.length < parts.length) throw new UnitError(`the unit ${word} is not known`)
  return units
}

/** One of a unit in mathjs, which knows the SI, its prefixes, and the customary units. */
function lookUp(word: string): ParsedUnit | null {
  const own = ownUnits.get(word)
  if (own !== undefined) return own
  let found
  try {
    found = mathUnit(1, word)
  } catch {
    return null
  }
  if (found.units.some(({ unit }) => unit.offset !== 0)) throw new UnitError(`${word} counts from a zero of its own and cannot be multiplied: use K`)
  // mathjs lists mass, length, time, current, temperature, luminous intensity, amount of substance, angle, bit; reactive power has a complex value.
  const [kg = 0, m = 0, s = 0, A = 0, K = 0, cd = 0, mol = 0, , bit = 0] = found.dimensions
  return typeof found.value === 'number' ? { factor: found.value, dimension: [kg, m, s, A, K, cd, mol, bit] } : null
}

function combine(a: ParsedUnit, b: ParsedUnit, power: number): ParsedUnit {
  return { factor: a.factor * b.factor ** power, dimension: combineDimensions(a.dimension, b.dimension, power) }
}

function take(reading: Reading, pattern: RegExp): RegExpExecArray | null {
  const match = pattern.exec(reading.rest)
  if (match !== null) reading.rest = reading.rest.slice(match[0].length)
  return match
}

const firstSign = ({ rest }: Reading) => [...rest.trim()][0]
