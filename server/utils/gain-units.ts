import type { GainUnits } from '#shared/schemas/design'
import type { ControllerForm, Loop, Plant } from '#shared/schemas/loop'
import { combineDimensions, type Dimension, dimensionless } from './expression/dimension'
import { parseFormula } from './expression/parse-formula'
import { simplestUnits, timesUnit, writeUnits } from './expression/write-unit'

/** Gains from the measured error to the plant's input, with the power of seconds that each has beyond the plain one. */
const onError = { k: 0, kp: 0, ki: -1, kd: 1 } as const

/**
 * The unit of each gain of a controller form, for gains in SI units. It follows from the units in the formulas of plant and sensor.
 * The shape of a fixed controller, the lead and the lag count as plain ratios.
 */
export function gainUnits(loop: Loop, { form }: ControllerForm): GainUnits {
  const plant = dimensionOf(loop.plant, 'loop.plant')
  const sensor = loop.sensor === undefined ? dimensionless : dimensionOf(loop.sensor, 'loop.sensor')
  const measured = plant && sensor && combineDimensions(plant, sensor)
  const unit = (name: keyof typeof onError) => inverse(measured, onError[name])
  switch (form) {
    case 'gain': return { k: unit('k') }
    case 'pd': return { kp: unit('kp'), kd: unit('kd') }
    case 'pi': return { kp: unit('kp'), ki: unit('ki') }
    case 'pid': return { kp: unit('kp'), ki: unit('ki'), kd: unit('kd') }
    case 'rate': return { kp: unit('kp'), kr: inverse(plant, 1) }
    case 'lead': case 'lag': return { k: unit('k'), zero: 'rad/s', pole: 'rad/s' }
  }
}

function dimensionOf(plant: Plant, path: string): Dimension | null {
  return plant.form === 'expression' ? parseFormula(plant, path).dimension : null
}

/** One over a dimension, times so many seconds. */
function inverse(dimension: Dimension | null, seconds: number): string | null {
  if (dimension === null) return null
  const plain = simplestUnits(combineDimensions(dimensionless, dimension, -1), true)
  return writeUnits(timesUnit(plain, 's', seconds))
}
