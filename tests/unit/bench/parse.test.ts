import { describe, expect, it } from 'vitest'
import { parseNumber, parseNumbers, parsePlaces, typedPlaces } from '~/utils/bench/parse'
import { formatExact, formatFigure, formatFixed, formatPolynomial, toTyped } from '~/utils/bench/format'
import { ratioText } from '~/utils/bench/formula-text'
import { symbolsOf } from '~/utils/bench/symbols'
import { seededRandom } from '../../helpers/random'

describe('typed numbers', () => {
  it.each([['0.012', 0.012], ['0,012', 0.012], ['−3', -3], ['1e3', 1000], ['.5', 0.5], ['2 400 000', 2400000], ['2\u00A0400\u00A0000', 2400000], [' +7 ', 7]])('reads %s', (text, value) => {
    expect(parseNumber(text)).toEqual({ value })
  })

  it.each([['', 'a number is missing'], ['abc', '“abc” is not a number'], ['1,2,3', '“1,2,3” is not a number'], ['1e999', '“1e999” is too large'], ['NaN', '“NaN” is not a number'], ['1 2', '“1 2” is not a number']])('refuses %s', (text, problem) => {
    expect(parseNumber(text)).toEqual({ problem })
  })

  it('reads lists, and names the item that is none', () => {
    expect(parseNumbers('1 3, 2;−4')).toEqual({ value: [1, 3, 2, -4] })
    expect(parseNumbers('')).toEqual({ value: [] })
    expect(parseNumbers('1 x 2')).toEqual({ problem: '“x” is not a number' })
  })

  it.each([
    ['1,5 2', [1.5, 2]], ['1,5; 2', [1.5, 2]], ['1;0,25', [1, 0.25]], ['0,012  1,5  0', [0.012, 1.5, 0]], ['1,5 2, 3', [1.5, 2, 3]],
    ['1,5,2', [1, 5, 2]], ['1, 5, 2', [1, 5, 2]], ['1, 5', [1, 5]], ['1,-5', [1, -5]], ['1.5, 2', [1.5, 2]], ['1.5,2', [1.5, 2]],
  ])('tells in %s whether a comma stands in a number or between two', (text, value) => {
    expect(parseNumbers(text)).toEqual({ value })
  })

  it.each(['1,5', ' 1,5 ', '1,5, 2', '2, 1,5'])('asks in %s, which could be either', (text) => {
    expect(parseNumbers(text)).toEqual({ problem: '“1,5” can be read in two ways: type 1.5 or 1, 5' })
  })

  it('refuses a number with two commas in a list of blanks', () => {
    expect(parseNumbers('1,5,2 3')).toEqual({ problem: '“1,5,2” is not a number' })
    expect(parseNumbers('1.5,2 3')).toEqual({ problem: '“1.5,2” is not a number' })
  })

  it('gives back what it wrote', () => {
    const random = seededRandom(7)
    for (let i = 0; i < 200; i++) {
      const value = Number(((random() - 0.5) * 10 ** Math.floor(random() * 12 - 4)).toPrecision(12))
      expect(parseNumber(formatExact(value))).toEqual({ value })
      expect(parseNumber(toTyped(value))).toEqual({ value })
    }
  })
})

describe('typed places', () => {
  it.each([
    ['-2', [{ re: -2, im: 0 }]],
    ['3j', [{ re: 0, im: 3 }, { re: 0, im: -3 }]],
    ['-1+3j', [{ re: -1, im: 3 }, { re: -1, im: -3 }]],
    ['-1 ± 3j', [{ re: -1, im: 3 }, { re: -1, im: -3 }]],
    ['-1 +- 3i', [{ re: -1, im: 3 }, { re: -1, im: -3 }]],
    ['-1 - 3j; -1 + 3j', [{ re: -1, im: -3 }, { re: -1, im: 3 }]],
    ['0 -2 −5', [{ re: 0, im: 0 }, { re: -2, im: 0 }, { re: -5, im: 0 }]],
    ['-j', [{ re: 0, im: -1 }, { re: 0, im: 1 }]],
    ['', []],
  ])('reads %s with its conjugates', (text, value) => {
    expect(parsePlaces(text)).toEqual({ value })
  })

  it.each([
    ['-1,5 -2', [{ re: -1.5, im: 0 }, { re: -2, im: 0 }]],
    ['-1,5 ± 3,2j; -2', [{ re: -1.5, im: 3.2 }, { re: -1.5, im: -3.2 }, { re: -2, im: 0 }]],
    ['-1, -2', [{ re: -1, im: 0 }, { re: -2, im: 0 }]],
    ['-1,-2', [{ re: -1, im: 0 }, { re: -2, im: 0 }]],
    ['0,1,2', [{ re: 0, im: 0 }, { re: 1, im: 0 }, { re: 2, im: 0 }]],
  ])('tells in %s whether a comma stands in a figure or between two places', (text, value) => {
    expect(parsePlaces(text)).toEqual({ value })
  })

  it('asks where a comma could be either', () => {
    expect(parsePlaces('-1,5')).toEqual({ problem: '“-1,5” can be read in two ways: type -1.5 or -1, 5' })
    expect(parsePlaces('-1,5 ± 3j')).toEqual({ problem: '“-1,5±3j” can be read in two ways: type -1.5±3j or -1, 5±3j' })
    expect(parsePlaces('0,5j')).toHaveProperty('problem')
  })

  it('refuses what is no place', () => {
    expect(parsePlaces('-1, x')).toEqual({ problem: '“x” is not a place such as −2 or −1 ± 3j' })
    expect(parsePlaces('-1+3')).toHaveProperty('problem')
  })

  it('gives back what it wrote, double pairs included', () => {
    const random = seededRandom(11)
    for (let i = 0; i < 100; i++) {
      const places = Array.from({ length: 4 }, () => {
        const re = Number((-random() * 10).toPrecision(6))
        const im = random() < 0.5 ? 0 : Number((random() * 10).toPrecision(6))
        return im === 0 ? [{ re, im }] : [{ re, im }, { re, im: -im }]
      }).flat()
      expect(parsePlaces(typedPlaces([...places, ...places]))).toEqual({ value: [...places, ...places] })
    }
  })
})

describe('figures', () => {
  it.each([[86.481788, '86.48'], [-0.5783333, '−0.5783'], [0, '0'], [26000, '26\u00A0000'], [123456.7, '1.235\u00A0×\u00A010⁵'], [0.00001234, '1.234\u00A0×\u00A010⁻⁵']])('shows %d with four significant digits', (value, text) => {
    expect(formatFigure(value)).toBe(text)
  })

  it('shows no minus before a zero that rounding made', () => {
    expect([formatFixed(-0.004, 2), formatFixed(-12.244, 2)]).toEqual(['0.00', '−12.24'])
  })

  it('writes polynomials by hand and as formulas', () => {
    expect(formatPolynomial([0.5, -3, 0, 1])).toBe('0.5\u00A0s³ − 3\u00A0s² + 1')
    expect(ratioText([1, 2], [1, 3, 0])).toBe('(s + 2) / (s^2 + 3*s)')
    expect(ratioText([2], [1])).toBe('2')
    expect(ratioText([-1.5, 0], [2, 0, 1])).toBe('-1.5*s / (2*s^2 + 1)')
  })

  it('finds the parameters of a formula once each, numbers and s left out', () => {
    expect(symbolsOf('kt*1e5 / (s*(J*s + b_1)*(τ*s + 1)) + kt')).toEqual(['kt', 'J', 'b_1', 'τ'])
  })
})
