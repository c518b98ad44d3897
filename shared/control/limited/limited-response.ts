import type { ClosedLoop } from '../closed-loop'
import type { LoopResponse } from '../response/response'
import type { ResponseInput } from '../types'

export function limitedResponse(loop: ClosedLoop, input: ResponseInput, amplitude: number, _limit: number): LoopResponse {
  return loop.respondTo(input, amplitude)
}
