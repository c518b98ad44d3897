import type { FrequencyResponse } from '#shared/control/types'

/** The figures of a loop at one frequency: dB and degrees. */
export interface FrequencyFigures {
  magnitudeDb: number
  phaseDeg: number
  sensitivityDb: number
  complementaryDb: number
}

/** The figures at a frequency, between two points of the grid along a straight line over decades; null outside the range. */
export function readAt(response: FrequencyResponse, frequency: number): FrequencyFigures | null {
  const grid = response.frequency
  const last = grid.length - 1
  if (last < 1 || !(frequency >= grid[0]! && frequency <= grid[last]!)) return null
  let [low, high] = [0, last]
  while (high - low > 1) {
    const middle = (low + high) >> 1
    if (grid[middle]! <= frequency) low = middle
    else high = middle
  }
  const share = Math.log(frequency / grid[low]!) / Math.log(grid[high]! / grid[low]!)
  const between = (values: readonly number[]) => values[low]! + share * (values[high]! - values[low]!)
  return {
    magnitudeDb: between(response.magnitudeDb),
    phaseDeg: between(response.phaseDeg),
    sensitivityDb: between(response.sensitivityDb),
    complementaryDb: between(response.complementaryDb),
  }
}
