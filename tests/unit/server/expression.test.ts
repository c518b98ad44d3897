import { describe, expect, it } from 'vitest'
import { InvalidInputError } from '#shared/control/errors'
import { parseFormula } from '../../../server/utils/expression/parse-formula'
import { parseUnit } from '../../../server/utils/expression/parse-unit'
import { writeDimension } from '../../../server/utils/expression/write-unit'
import { seededRandom } from '../../helpers/random'

const path = 'loop.plant.expression'
const parameters = {
  J: { value: 0.5 }, b: { value: 2 }, kt: { value: 3 }, tau: { value: 0.25 }, τ: { value: 0.25 }, n: { value: 2 }, half: { value: 0.5 },
}
const read = (formula: string) => parseFormula({ expression: formula, parameters }, 'loop.plant')

function fault(formula: string): { message: string, position: number | undefined } {
  try {
    read(formula)
  } catch (error) {
    if (error instanceof InvalidInputError && error.path === path) return { message: error.message, position: error.position }
    throw error
  }
  throw new Error(`"${formula}" was read`)
}

describe('a formula', () => {
  it.each([
    ['kt/(J*s^2+b*s)', [3], [1, 4, 0], 2],
    ['kt / (s·(J·s + b)·(τ·s + 1))', [3], [1, 8, 16, 0], 8],
    ['1/s + 1/(s+1)', [2, 1], [1, 1, 0], 1],
    ['1/s + 1/s', [2], [1, 0], 1],
    ['2 s/(s^2+1)', [2, 0], [1, 0, 1], 1],
    ['(1/s)/(1+1/s)', [1], [1, 1], 1],
    ['-s^2/(-s-1)^3', [-1, 0, 0], [-1, -3, -3, -1], 1],
    ['s^-1*(s+1)^(-n)', [1], [1, 2, 1, 0], 1],
    ['(2*pi)^half/(s+1e3)', [Math.sqrt(2 * Math.PI)], [1, 1000], 1],
    ['.5/(2.0*s+1)', [0.5], [2, 1], 1],
    ['4', [4], [1], 1],
  ])('%s is read', (formula, numerator, denominator, factor) => {
    const plant = read(formula)
    const lead = plant.denominator[0]! / denominator[0]!
    expect(plant.denominator.map(c => c / lead)).toEqual(denominator.map(c => expect.closeTo(c, 12)))
    expect(plant.numerator.map(c => c / lead)).toEqual(numerator.map(c => expect.closeTo(c * factor, 12)))
  })

  it('takes the micro sign for the letter mu, in the formula and among the parameters', () => {
    const withName = (formula: string, name: string) => parseFormula({ expression: formula, parameters: { [name]: { value: 0.3 } } }, 'loop.plant')
    const expected = withName('1/(m*s+1)', 'm')
    expect(withName('1/(µ*s+1)', 'μ')).toEqual(expected)
    expect(withName('1/(μ*s+1)', 'µ')).toEqual(expected)
  })

  it('keeps a common factor that was typed above and below: a hidden mode belongs to the loop', () => {
    expect(read('(s+1)/((s+1)*(s+2))')).toEqual({ numerator: [1, 1], denominator: [1, 3, 2], dimension: null })
  })

  it.each([
    ['kt/(J*s^2+q*s)', 10, /^q is not among the parameters$/],
    ['kt(s+1)/s^2', 0, /^kt is not a function; to multiply, write a \* before the parenthesis$/],
    ['sin(s)/s^2', 0, /ratio of polynomials in s: sin cannot/],
    ['1/(s+)', 5, /breaks off here/],
    ['(s+1', 3, /breaks off here/],
    ['1/s;2', 3, /^";" has no place/],
    ['a=1/s', 1, /^"=" has no place/],
    ['"1"/s', 0, /has no place/],
    ['1/[s]', 2, /has no place/],
    ['1/s!', 3, /has no place/],
    ['true/s', 0, /^true is a reserved word/],
    ['Infinity/s', 0, /reserved word/], ['NaN/s', 0, /reserved word/], ['2.*s', 0, /"\.\*" has no place/],
    ['1/(0x10*s+1)', 3, /decimal digits/], ['1/(s² + 1)', 4, /^write \^2 in place of ²$/], ['1/(ж*s+1)', 3, /"ж" has no place/],
    ['exp(-s)/s', 0, /ratio of polynomials/],
    ['constructor/s', 0, /^constructor is not among/],
    ['1e999/s', 0, /no finite number/],
    ['1/(s-s)', 3, /divides by zero/],
    ['1/0', 2, /divides by zero/],
    ['s^s/s^9', 2, /exponent must be a number/],
    ['1/s^0.5', 4, /whole exponents/],
    ['0^-1/s', 3, /zero has no such power/],
    ['1/(s+1)^41', 8, /beyond order 40/],
    ['1e200*1e200/s', 6, /grow beyond/],
    ['s mod 2', 2, /^mod is a reserved word/],
    [`1/${'('.repeat(41)}s${')'.repeat(41)}`, 42, /nested deeper/],
    [`1/${'-'.repeat(60)}s`, 62, /nested deeper/],
  ])('%s is refused at its character', (formula, position, message) => {
    const found = fault(formula)
    expect(found.message).toMatch(message)
    expect(found.position).toBe(position)
  })
})

describe('the units of a formula', () => {
  const units: Record<string, string> = {
    kt: 'N m/A', J: 'kg m^2', b: 'N m s', T: 's', tau: 'ms', kv: 'm/(s V)', R: 'ohm', L: 'mH', ke: 'V s/rad', m: 'kg', x: 'm', n: '1', deg: 'deg',
  }
  const withUnits = (expression: string, others: Record<string, { value: number, unit?: string }> = {}) => {
    const known = Object.fromEntries(Object.entries(units).map(([name, unit]) => [name, { value: 1, unit }]))
    return parseFormula({ expression, parameters: { ...known, free: { value: 2 }, ...others } }, 'loop.plant')
  }
  const unlike = (expression: string) => {
    try {
      withUnits(expression)
    } catch (error) {
      if (error instanceof InvalidInputError && error.path === path) return [error.position, error.message]
      throw error
    }
    throw new Error(`"${expression}" was read`)
  }

  it.each([
    ['kt/(J*s^2+b*s)', '1/A'], ['kt / (s*(J*s + b)*(T*s + 1))', '1/A'], ['kt/(s*((J*s+b)*(L*s+R)+kt*ke))', '1/V'], ['kv/(tau*s+1)', 'm/(V s)'],
    ['m*x*s^2', 'N'], ['(J/m)^0.5', 'm'], ['1/(1+1/(tau*s))*T', 's'], ['-x', 'm'], ['x - 0', 'm'], ['0 + x + 0*s', 'm'], ['n + deg + pi', ''], ['2^n*x', 'm'],
  ])('%s tells the unit %j', (expression, unit) => {
    const { dimension } = withUnits(expression)
    expect(dimension && writeDimension(dimension)).toBe(unit)
  })

  it.each(['kt/(s*(s+2))', '2/(s*(s+3))', 'free/(T*s+1)', 'kt/(J*s^2+free)*free', 'kt*(s+1) + x*(s^2+s)', '1/(0.5*s+1)', 's', '(s+1) + T'])(
    '%s is fine and tells none: sums of numbers and s, and parameters without a unit, may be in anything', (expression) => {
      if (expression === '(s+1) + T') expect(withUnits(expression).dimension).toEqual([0, 0, 1, 0, 0, 0, 0, 0])
      else expect(withUnits(expression).dimension).toBeNull()
    })

  it.each<[string, number, string]>([
    ['kt/(J*s^2+b)', 10, 'J*s^2 is in N m, b in N m s: unlike terms cannot be added'],
    ['kt/(J*s^2 - m)', 12, 'J*s^2 is in N m, m in kg: unlike terms cannot be added'],
    ['1/(m*s+1)', 7, 'm*s is in N s/m, 1 has none: unlike terms cannot be added; a number gets a unit as a parameter'],
    ['1/(1 + x)', 7, '1 has no unit, x in m: unlike terms cannot be added'],
    ['kt/(J*s^2+3*s)', 10, '3*s in 1/s'],
    ['x + (T + free)', 5, 'x is in m, (T + free) in s: unlike terms cannot be added'],
    ['x + n', 4, 'x is in m, n has none: unlike terms cannot be added'],
    ['x + deg', 4, 'x is in m, deg in deg: unlike terms cannot be added'],
    ['J^x*s', 2, 'an exponent is a plain number, without a unit'],
  ])('%s is refused at its character', (expression, position, message) => {
    const [at, said] = unlike(expression)
    expect(said).toContain(message)
    expect(at).toBe(position)
  })

  it('names a long term by its beginning', () => {
    expect(unlike(`${'J*'.repeat(40)}s + x`)[1]).toMatch(/^J\*J\*J[J*]*… is in kg\^40 m\^80\/s, x in m: /)
  })

  it('computes in SI units', () => {
    expect(withUnits('1/(tau*s + 1)', { tau: { value: 20, unit: 'ms' } })).toMatchObject({ numerator: [50], denominator: [1, 50] })
  })

  it('keeps to what can be computed when powers grow', () => {
    expect(withUnits('x^1e308*x^1e308/s').dimension).toBeNull()
  })

  it('names the parameter whose unit is not known', () => {
    expect(() => withUnits('q/s', { q: { value: 1, unit: 'bananas' } })).toThrow(expect.objectContaining({ path: 'loop.plant.parameters.q.unit', message: 'the unit bananas is not known' }))
  })

  it('adds like terms in whatever units, and refuses the same sum once one unit is another (seeded)', () => {
    const random = seededRandom(77)
    const alike = [['N m', 'kg m^2/s^2', 'J', 'V A s', 'Ncm'], ['V', 'W/A', 'A ohm', 'mV'], ['N s/m', 'kg/s', 'N/(m/s)'], ['rad/s', '1/s', 'Hz', 'rpm', 'deg/s']]
    const pick = <T>(list: readonly T[]) => list[Math.floor(random() * list.length)]!
    for (let round = 0; round < 200; round += 1) {
      const family = pick(alike)
      const stranger = pick(pick(alike.filter(other => other !== family)))
      const names = ['a', 'b', 'c', 'd']
      const sum = names.map((name, index) => index === 0 ? name : pick([' + ', ' - ']) + name).join('')
      const parameters = Object.fromEntries(names.map(name => [name, { value: 1 + random(), unit: pick(family) }]))
      expect(parseFormula({ expression: sum, parameters }, 'loop.plant').dimension).toEqual(parseUnit(family[0]!).dimension)
      const odd = pick(names)
      parameters[odd] = { value: 1, unit: stranger }
      expect(() => parseFormula({ expression: sum, parameters }, 'loop.plant'), `${odd} in ${stranger} among ${family[0]}`).toThrow(/unlike terms/)
    }
  })
})
