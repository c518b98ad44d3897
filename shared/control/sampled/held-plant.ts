import { leading } from '../../numerics/polynomial'
import type { Complex } from '../../numerics/complex'
import { roots } from '../../numerics/roots'
import { effectivePlant } from '../controller'
import { NoAnswerError } from '../errors'
import { gridOf } from '../response/grid'
import { realise, sectionsOf } from '../response/state-space'
import { StepPropagator } from '../response/step-propagator'
import { relativeDegree, series } from '../transfer-function'
import type { LoopModel, Sampling, TransferFunction } from '../types'

/** Whole periods of delay that are carried along: each is one more root of the loop. And roots of all kinds. */
const mostPeriods = 60
const mostRoots = 80
/** A share of the period that rounding may leave of a whole number of periods. */
const whole = 1e-9

/**
 * Plant and sensor between samples: exact under a held input. What the controller puts out reaches the plant `periods` whole periods and a part of one later, so
 * within a period the plant first still gets the older value and then the newer one.
 */
export interface HeldPlant {
  order: number
  poles: Complex[]
  /** Whole periods of delay. */
  periods: number
  /** Steps of the part of a period that runs under the older value (none without a fraction), then of the part under the newer. */
  older: StepPropagator[]
  newer: StepPropagator[]
  /** Output and measured output on the state, and what they take of the held input directly. */
  output: { weights: Float64Array, direct: number }
  measured: { weights: Float64Array, direct: number }
}

/**
 * @throws NoAnswerError for a dead time of more than 60 periods, or more than what makes 80 roots with those of plant and sensor
 */
export function heldPlant(model: LoopModel, { period, computingDelay }: Sampling): HeldPlant {
  const plant = effectivePlant(model)
  const sensor = model.sensor ?? { numerator: [1], denominator: [1] }
  const through = series(plant, { numerator: sensor.denominator, denominator: sensor.denominator })
  const measured = series(plant, sensor)
  const poles = roots(measured.denominator)
  const system = realise(sectionsOf(poles), measured.denominator)
  const reading = (g: TransferFunction) => ({
    weights: system.outputOf(g.numerator), direct: relativeDegree(g) === 0 ? leading(g.numerator) / leading(g.denominator) : 0,
  })
  const outputs = [reading(through), reading(measured)] as const
  const delay = (model.deadTime ?? 0) / period + (computingDelay ? 1 : 0)
  const periods = Math.floor(delay + whole)
  const fraction = delay - periods <= whole ? 0 : delay - periods
  if (periods > mostPeriods || periods + system.input.length > mostRoots) {
    throw new NoAnswerError(`the dead time lasts ${periods} sample periods: too many to compute the sampled loop with`, 'loop.samplePeriod')
  }
  const prepared = new Map<number, StepPropagator>()
  const steps = (length: number) => length === 0 ? [] : gridOf(length, poles, 0).map((size) => {
    if (!prepared.has(size)) prepared.set(size, new StepPropagator(system, [...outputs], size))
    return prepared.get(size)!
  })
  return {
    order: system.input.length, poles, periods,
    older: steps(fraction * period), newer: steps((1 - fraction) * period),
    output: outputs[0], measured: outputs[1],
  }
}

/** The state after a part of a period. */
export function carry(steps: readonly StepPropagator[], x: Float64Array, held: number): Float64Array {
  return steps.reduce((state, step) => step.endHeld(state, held), x)
}
