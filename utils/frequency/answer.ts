import type { FrequencyResponse, Readings } from '#shared/control/types'

/** A loop over frequency, with the readings of the very same gains. */
export interface FrequencyAnswer {
  response: FrequencyResponse
  readings: Readings
  stable: boolean
}
