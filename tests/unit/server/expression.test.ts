import { describe, expect, it } from 'vitest'
import { InvalidInputError } from '#shared/control/errors'
import { parseFormula } from '../../../server/utils/expression/parse-formula'

const path = 'loop.plant.expression'
const parameters = {
  J: { value: 0.5 }, b: { value: 2 }, kt: { value: 3 }, tau: { value: 0.25 }, τ: { value: 0.25 }, n: { value: 2 }, half: { value: 0.5 },
}
const read = (formula: string) => parseFormula(formula, parameters, path)

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
    const expected = parseFormula('1/(m*s+1)', { m: { value: 0.3 } }, path)
    expect(parseFormula('1/(µ*s+1)', { μ: { value: 0.3 } }, path)).toEqual(expected)
    expect(parseFormula('1/(μ*s+1)', { µ: { value: 0.3 } }, path)).toEqual(expected)
  })

  it('keeps a common factor that was typed above and below: a hidden mode belongs to the loop', () => {
    expect(read('(s+1)/((s+1)*(s+2))')).toEqual({ numerator: [1, 1], denominator: [1, 3, 2] })
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
