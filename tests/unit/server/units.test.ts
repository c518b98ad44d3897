import { describe, expect, it } from 'vitest'
import type { ScenarioDocument } from '#shared/schemas/document'
import type { ControllerForm, Loop, Parameter } from '#shared/schemas/loop'
import { combineDimensions, type Dimension, dimensionless, isSameDimension } from '../../../server/utils/expression/dimension'
import { parseUnit, UnitError } from '../../../server/utils/expression/parse-unit'
import { readQuantities } from '../../../server/utils/expression/quantities'
import { simplestUnits, writeDimension, writeUnits } from '../../../server/utils/expression/write-unit'
import { gainUnits } from '../../../server/utils/gain-units'
import { scenarios } from '../../../scripts/seed/scenarios.mjs'
import { demoScenario } from '~/utils/bench/demo-scenario'
import { seededRandom } from '../../helpers/random'

/** Exponents of kg, m, s, A; nothing else. */
const base = (kg: number, m: number, s: number, A: number): Dimension => [kg, m, s, A, 0, 0, 0, 0]

function fault(unit: string): string {
  try {
    parseUnit(unit)
  } catch (error) {
    if (error instanceof UnitError) return error.message
    throw error
  }
  throw new Error(`"${unit}" was read`)
}

describe('the text of a unit', () => {
  // The SI Brochure, 9th edition (BIPM, 2019), table 4: derived units with special names in terms of base units (from memory).
  it.each([
    ['N', base(1, 1, -2, 0)], ['V', base(1, 2, -3, -1)], ['ohm', base(1, 2, -3, -2)], ['H', base(1, 2, -2, -2)], ['W', base(1, 2, -3, 0)],
    ['J', base(1, 2, -2, 0)], ['Pa', base(1, -1, -2, 0)], ['Hz', base(0, 0, -1, 0)], ['C', base(0, 0, 1, 1)], ['F', base(-1, -2, 4, 2)],
    ['S', base(-1, -2, 3, 2)], ['Wb', base(1, 2, -2, -1)], ['T', base(1, 0, -2, -1)], ['rad', dimensionless],
  ])('%s is the product of base units that the SI defines', (unit, dimension) => {
    const parsed = parseUnit(unit)
    expect(parsed.factor).toBe(1)
    expect(isSameDimension(parsed.dimension, dimension)).toBe(true)
  })

  it.each([
    ['kg m^2', base(1, 2, 0, 0), 1], ['kg·m²', base(1, 2, 0, 0), 1], ['kgm2', base(1, 2, 0, 0), 1], ['kg cm^2', base(1, 2, 0, 0), 1e-4],
    ['g·cm²', base(1, 2, 0, 0), 1e-7], ['gcm2', base(1, 2, 0, 0), 1e-7],
    ['N m/A', base(1, 2, -2, -1), 1], ['Nm/A', base(1, 2, -2, -1), 1], ['mNm/A', base(1, 2, -2, -1), 1e-3], ['N*m*s/rad', base(1, 2, -1, 0), 1],
    ['Nms/rad', base(1, 2, -1, 0), 1], ['N m s', base(1, 2, -1, 0), 1], ['N.m', base(1, 2, -2, 0), 1], ['N-m', base(1, 2, -2, 0), 1], ['Ncm', base(1, 2, -2, 0), 0.01],
    ['V s/rad', base(1, 2, -2, -1), 1], ['V/(rad/s)', base(1, 2, -2, -1), 1], ['rad/(s V)', base(-1, -2, 2, 1), 1], ['Vs', base(1, 2, -2, -1), 1],
    ['V/krpm', base(1, 2, -2, -1), 3 / (100 * Math.PI)], ['ms', base(0, 0, 1, 0), 1e-3], ['µs', base(0, 0, 1, 0), 1e-6], ['μs', base(0, 0, 1, 0), 1e-6], ['min', base(0, 0, 1, 0), 60],
    ['1/s', base(0, 0, -1, 0), 1], ['s^-1', base(0, 0, -1, 0), 1], ['s^(-1)', base(0, 0, -1, 0), 1], ['s-1', base(0, 0, -1, 0), 1], ['s⁻¹', base(0, 0, -1, 0), 1],
    ['rad/s', base(0, 0, -1, 0), 1], ['°/s', base(0, 0, -1, 0), Math.PI / 180], ['rpm', base(0, 0, -1, 0), Math.PI / 30], ['m/s/s', base(0, 1, -2, 0), 1], ['(m/s)^2', base(0, 2, -2, 0), 1],
    ['mH', base(1, 2, -2, -2), 1e-3], ['Ω', base(1, 2, -3, -2), 1], ['kΩ', base(1, 2, -3, -2), 1e3], ['mOhm', base(1, 2, -3, -2), 1e-3],
    ['deg', dimensionless, Math.PI / 180], ['rev', dimensionless, 2 * Math.PI], ['%', dimensionless, 0.01], ['1', dimensionless, 1], ['-', dimensionless, 1],
    ['counts/rad', dimensionless, 1], ['inc', dimensionless, 1], ['increments', dimensionless, 1], [' N  m / A ', base(1, 2, -2, -1), 1],
  ] as const)('%j is read as engineers mean it', (unit, dimension, factor) => {
    const parsed = parseUnit(unit)
    expect(parsed.dimension.map(exponent => exponent + 0)).toEqual(dimension)
    expect(parsed.factor / factor).toBeCloseTo(1, 14)
  })

  it.each([
    ['furlongs', 'the unit furlongs is not known'], ['N foo/A', 'the unit foo is not known'], ['NM', 'the unit NM is not known'], ['dB', 'the unit dB is not known'],
    ['constructor', 'the unit constructor is not known'], ['toString', 'the unit toString is not known'], ['hasOwnProperty', 'the unit hasOwnProperty is not known'],
    ['VAR', 'the unit VAR is not known'], ['__proto__', '"_" has no place here in a unit'], ['<b>', '"<" has no place here in a unit'], ['кг', '"к" has no place here in a unit'],
    ['degC', 'degC counts from a zero of its own and cannot be multiplied: use K'], ['W/°C', 'degC counts from a zero of its own and cannot be multiplied: use K'],
    ['degF', 'degF counts from a zero of its own and cannot be multiplied: use K'],
    ['10 ms', '10 belongs to the value: a unit holds no number but its powers'], ['1e999 m', '1e999 belongs to the value: a unit holds no number but its powers'],
    ['V/rad s', 'what follows the "/" can be read in two ways: put it in parentheses, as in V/(rad s)'],
    ['m^1e9', 'a power in a unit is a whole number up to 9'], ['m^10', 'a power in a unit is a whole number up to 9'], ['m^0.5', 'a power in a unit is a whole number up to 9'],
    ['m^', '"^" has no place here in a unit'], ['m^(-2', '"^" has no place here in a unit'], ['/s', '"/" has no place here in a unit'], ['N m/', 'the unit breaks off'],
    ['()', '")" has no place here in a unit'], ['(m', 'a ")" is missing in the unit'], ['m)', '")" has no place here in a unit'], ['('.repeat(32), 'the unit breaks off'],
    ['Ym^9 Ym^9 Ym^9', 'this unit is beyond what can be computed'], ['ym^9 ym^9 ym^9', 'this unit is beyond what can be computed'], ['m=1', '"=" has no place here in a unit'],
    ['m10', '10 belongs to the value: a unit holds no number but its powers'], ['m**2', '"*" has no place here in a unit'],
  ])('%j is refused in words', (unit, message) => {
    expect(fault(unit)).toBe(message)
  })

  it('is read or refused, whatever it is', () => {
    const random = seededRandom(23)
    const scraps = ['m', 's', 'kg', 'N', 'Nm', '^', '^2', '^-1', '/', '*', '·', ' ', '(', ')', '1', '9e9', '²', '⁻', '%', '°', '-', '.', 'Ω', '_', '\u0000', '💥', 'in', 'e', 'valueOf']
    let read = 0
    for (let round = 0; round < 3000; round += 1) {
      const text = Array.from({ length: 1 + Math.floor(random() * 9) }, () => scraps[Math.floor(random() * scraps.length)]).join('').slice(0, 32)
      try {
        const { factor, dimension } = parseUnit(text)
        expect([factor, ...dimension].every(Number.isFinite), text).toBe(true)
        read += 1
      } catch (error) {
        expect(error, text).toBeInstanceOf(UnitError)
      }
    }
    expect(read).toBeGreaterThan(100)
  })
})

describe('a parameter', () => {
  const read = (parameter: Parameter) => readQuantities({ p: parameter }, 'loop.plant.parameters').p

  it('is meant in its unit', () => {
    expect(read({ value: 20, unit: 'ms' })).toMatchObject({ value: 0.02, measure: { kind: 'known', dimension: base(0, 0, 1, 0) } })
    expect(read({ value: 300, unit: 'kg cm^2' })?.value).toBeCloseTo(0.03, 15)
    expect(read({ value: 180, unit: 'deg' })?.value).toBeCloseTo(Math.PI, 14)
  })

  it('without a unit is a plain number of unknown dimension', () => {
    expect(read({ value: 20 })).toEqual({ value: 20, measure: { kind: 'unknown' } })
    expect(read({ value: 20, unit: ' ' })).toEqual({ value: 20, measure: { kind: 'unknown' } })
  })

  it.each<[Parameter, RegExp]>([
    [{ value: 1, unit: 'furlongs' }, /^the unit furlongs is not known$/],
    [{ value: 1e300, unit: 'Ym' }, /^in SI units the value is beyond/], [{ value: 1e-310, unit: 'ym' }, /^in SI units the value is beyond/],
  ])('that cannot be read is refused at its unit', (parameter, message) => {
    expect(() => read(parameter)).toThrow(expect.objectContaining({ name: 'InvalidInputError', path: 'loop.plant.parameters.p.unit', message: expect.stringMatching(message) }))
  })
})

describe('the unit that is written', () => {
  it.each([
    'kg', 'm', 's', 'A', 'K', 'N', 'V', 'W', 'ohm', 'H', 'F', 'kg m^2', 'N m', 'N m s', 'N/m', 'N s/m', 'V s', 'V/m', 'V s/m', 'A/m', 'A s/m', 'A s', 'm/s', 'm/s^2', '1/s',
    '1/m', 'N/m^2', 'kg/m^3', 'W/K', 'K/W', 'm^2/s', 'm/V', 'm/(s V)', '1/A', '1/V', '',
  ])('of %j is that unit again', (unit) => {
    const dimension = unit === '' ? dimensionless : parseUnit(unit).dimension
    expect(writeDimension(dimension)).toBe(unit.replace('m/(s V)', 'm/(V s)'))
  })

  it.each([['V/N', 'V/N'], ['A/(N m)', 'A/(N m)'], ['V/(N m)', 'V/(N m)'], ['A/N', 'A/N'], ['V s/m', 'V s/m'], ['N', 'N']])('of a gain in %s has what drives above the line', (unit, written) => {
    expect(writeUnits(simplestUnits(parseUnit(unit).dimension, true))).toBe(written)
  })

  it('means the same dimension, for random products', () => {
    const random = seededRandom(9)
    const symbols = ['kg', 'm', 's', 'A', 'K', 'N', 'V', 'W', 'ohm', 'H', 'F', 'mol', 'cd', 'bits']
    for (let round = 0; round < 1000; round += 1) {
      const factors = Array.from({ length: 1 + Math.floor(random() * 3) }, () => `${symbols[Math.floor(random() * symbols.length)]}^${Math.floor(random() * 7) - 3}`)
      const { dimension } = parseUnit(factors.join(' '))
      const written = writeDimension(dimension)
      // Powers that add up beyond 9 can be written, not typed.
      if (/\^\d\d/.test(written)) continue
      const again = written === '' ? dimensionless : parseUnit(written.replaceAll('bit', 'bits')).dimension
      expect(isSameDimension(again, dimension), `${factors.join(' ')} as ${written}`).toBe(true)
      expect(combineDimensions(dimension, again, -1).every(exponent => Math.abs(exponent) < 1e-9)).toBe(true)
    }
  })
})

describe('the units of gains', () => {
  const slew: Loop['plant'] = {
    form: 'expression', expression: 'kt / (s*(J*s + b)*(T*s + 1))',
    parameters: { kt: { value: 1, unit: 'N m/A' }, J: { value: 1, unit: 'kg m^2' }, b: { value: 1, unit: 'N m s' }, T: { value: 90, unit: 'ms' } },
  }
  const speed = (unit: string): Loop['plant'] => ({ form: 'expression', expression: 'k/(T*s+1)', parameters: { k: { value: 1, unit }, T: { value: 1, unit: 's' } } })
  const coefficients: Loop['plant'] = { form: 'coefficients', numerator: [1], denominator: [1, 1] }
  const pid: ControllerForm = { form: 'pid', thirdPole: -1 }

  it.each<[string, Loop, ControllerForm, Record<string, string | null>]>([
    ['current in, angle out', { plant: slew }, { form: 'gain' }, { k: 'A' }],
    ['a fixed shape as a plain ratio', { plant: slew }, { form: 'gain', shape: { numerator: [1, 2], denominator: [1, 5] } }, { k: 'A' }],
    ['three terms', { plant: slew }, pid, { kp: 'A', ki: 'A/s', kd: 'A s' }],
    ['rate feedback', { plant: slew }, { form: 'rate' }, { kp: 'A', kr: 'A s' }],
    ['a lead', { plant: slew }, { form: 'lead', poleZeroRatio: 5 }, { k: 'A', zero: 'rad/s', pole: 'rad/s' }],
    ['a lag', { plant: coefficients }, { form: 'lag', poleZeroRatio: 0.1, zero: -1 }, { k: null, zero: 'rad/s', pole: 'rad/s' }],
    ['volts in, metres per second out', { plant: speed('m/(s V)') }, { form: 'pi' }, { kp: 'V s/m', ki: 'V/m' }],
    ['torque in, speed out', { plant: speed('rad/(s N m)') }, { form: 'pi' }, { kp: 'N m s', ki: 'N m' }],
    ['force in, metres out', { plant: speed('mm/N') }, { form: 'pd' }, { kp: 'N/m', kd: 'N s/m' }],
    ['a torque in, integrated', { plant: speed('rad/(N m)') }, { form: 'pi' }, { kp: 'N m', ki: 'N m/s' }],
    ['plain numbers', { plant: speed('%') }, pid, { kp: '', ki: '1/s', kd: 's' }],
    ['coefficients tell nothing', { plant: coefficients }, { form: 'pi' }, { kp: null, ki: null }],
    ['a sensor in volts', { plant: slew, sensor: speed('V/rad') }, { form: 'rate' }, { kp: 'A/V', kr: 'A s' }],
    ['a sensor by coefficients', { plant: slew, sensor: coefficients }, { form: 'rate' }, { kp: null, kr: 'A s' }],
  ])('%s', (_what, loop, controller, units) => {
    expect(gainUnits(loop, controller)).toEqual(units)
  })

  it('are known for every formula that the product brings along', () => {
    const documents = [demoScenario.document, ...scenarios.map(({ document }) => document as ScenarioDocument)].filter(({ loop }) => loop.plant.form === 'expression')
    expect(documents.map(({ loop, controller }) => gainUnits(loop, controller).k)).toEqual(['A', 'V', 'A'])
  })
})
