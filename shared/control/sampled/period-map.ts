import { flat, linearPeriod, restingState, unitState } from './sampled-step'
import type { HeldPlant } from './held-plant'
import type { SampledController } from './sampled-controller'

/** One period of the sampled loop as a linear map of its whole state, with what output and controller output take of that state at its start. */
export interface PeriodMap {
  size: number
  /** size*size entries, row after row. */
  matrix: Float64Array
  output: Float64Array
  effort: Float64Array
}

const still = { reference: 0, disturbance: 0 }

export function periodMap(held: HeldPlant, controller: SampledController): PeriodMap {
  const size = flat(restingState(held, controller)).length
  const map: PeriodMap = { size, matrix: new Float64Array(size * size), output: new Float64Array(size), effort: new Float64Array(size) }
  for (let j = 0; j < size; j++) {
    const { next, y, u } = linearPeriod(held, controller, unitState(held, controller, j), still)
    flat(next).forEach((entry, i) => { map.matrix[i * size + j] = entry })
    map.output[j] = y
    map.effort[j] = u
  }
  return map
}
