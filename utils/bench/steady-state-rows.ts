import type { DesignSolution } from '#shared/control/types'
import { formatFigure, gap } from './format'

export interface SteadyStateRow {
  label: string
  /** Its name in `data-test`. */
  test: string
  value: number | null
  shown: string
}

/** The steady state as a table: a constant without limit is infinite, an error without limit grows, and an unstable loop comes to no rest. */
export function steadyStateRows({ steadyState, readings, stable }: Pick<DesignSolution, 'steadyState' | 'readings' | 'stable'>): SteadyStateRow[] {
  const { type, positionConstant, velocityConstant, accelerationConstant, errorParabola } = steadyState
  const figure = (label: string, test: string, value: number | null, unit: string, none: string): SteadyStateRow =>
    ({ label, test, value, shown: value === null ? none : formatFigure(value) + (unit === '' || value === 0 ? '' : gap + unit) })
  const growing = stable ? 'grows' : '–'
  return [
    { label: 'Type', test: 'system-type', value: type, shown: type === null ? '–' : String(type) },
    figure('Position constant Kp', 'position-constant', positionConstant, '', 'infinite'),
    figure('Velocity constant Kv', 'velocity-constant', velocityConstant, '1/s', 'infinite'),
    figure('Acceleration constant Ka', 'acceleration-constant', accelerationConstant, '1/s²', 'infinite'),
    figure('Error after a unit step', 'error-step', readings.steadyStateErrorStep, '', growing),
    figure('Error after a ramp, 1/s', 'error-ramp', readings.steadyStateErrorRamp, '', growing),
    figure('Error after a parabola, t²/2', 'error-parabola', errorParabola, '', growing),
  ]
}
