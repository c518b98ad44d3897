import type { ClosedLoop } from '../closed-loop'
import type { LoopFunctions } from '../controller'
import type { Controller, Gains, LoopModel, Sampling } from '../types'

export function sampledLoop(_model: LoopModel, _controller: Controller, _gains: Gains, _functions: LoopFunctions, _sampling: Sampling): ClosedLoop {
  throw new Error('todo')
}
