import { InvalidInputError } from '#shared/control/errors'
import type { Parameter } from '#shared/schemas/loop'
import { type Measure, unknownMeasure } from './measure'
import { parseUnit, UnitError } from './parse-unit'

/** A parameter in SI units. */
export interface Quantity {
  value: number
  measure: Measure
}

/**
 * Parameters in SI units: each value is meant in its unit, so that 20 ms count as 0.02. Without a unit a value is a plain number in SI units, and
 * nothing is known of its dimension.
 *
 * @param path the field of the request that carries the parameters
 * @throws InvalidInputError at the unit that cannot be read
 */
export function readQuantities(parameters: Readonly<Record<string, Parameter>>, path: string): Record<string, Quantity> {
  return Object.fromEntries(Object.entries(parameters).map(([name, parameter]) => [name, readQuantity(parameter, `${path}.${name}.unit`)]))
}

function readQuantity({ value, unit }: Parameter, path: string): Quantity {
  if (unit === undefined || unit.trim() === '') return { value, measure: unknownMeasure }
  try {
    const { factor, dimension } = parseUnit(unit)
    const inSi = value * factor
    if (!Number.isFinite(inSi) || (inSi === 0 && value !== 0)) throw new UnitError('in SI units the value is beyond what can be computed')
    return { value: inSi, measure: { kind: 'known', dimension, written: unit.trim() } }
  } catch (error) {
    if (error instanceof UnitError) throw new InvalidInputError(path, error.message)
    throw error
  }
}
