import { carry, type HeldPlant } from './held-plant'
import type { SampledController } from './sampled-controller'

/** Where a sampled loop stands just before a sample: plant and sensor, controller, and the outputs still on their way, the newest first. */
export interface SampledState {
  plant: Float64Array
  controller: Float64Array
  sent: Float64Array
}

export function restingState({ order, periods }: HeldPlant, controller: SampledController): SampledState {
  return { plant: new Float64Array(order), controller: new Float64Array(controller.row.length), sent: new Float64Array(periods + 1) }
}

/** Output and measured output at the sample, which still see the value held before it. */
export function readAt(held: HeldPlant, { plant, sent }: SampledState): { y: number, m: number } {
  const before = sent[sent.length - 1]!
  return { y: dot(held.output.weights, plant) + held.output.direct * before, m: dot(held.measured.weights, plant) + held.measured.direct * before }
}

/** The controller's answer to a sample, and its next state. */
export function control(controller: SampledController, state: Float64Array, error: number, y: number): { u: number, next: Float64Array } {
  const n = state.length
  const next = new Float64Array(n)
  for (let i = 0; i < n; i++) {
    let sum = controller.onError[i]! * error + controller.onOutput[i]! * y
    for (let j = 0; j < n; j++) sum += controller.matrix[i * n + j]! * state[j]!
    next[i] = sum
  }
  return { u: dot(controller.row, state) + controller.errorGain * error + controller.outputGain * y, next }
}

/** What the plant gets during the older and the newer part of a period that begins with u. */
export function heldValues(sent: Float64Array, u: number): { older: number, newer: number } {
  return { older: sent[sent.length - 1]!, newer: sent.length === 1 ? u : sent[sent.length - 2]! }
}

/** One period of the loop under a constant reference and disturbance, without a limit; with the output at its start and the controller's answer. */
export function linearPeriod(held: HeldPlant, controller: SampledController, state: SampledState, { reference, disturbance }: { reference: number, disturbance: number }):
{ next: SampledState, y: number, u: number } {
  const { y, m } = readAt(held, state)
  const { u, next } = control(controller, state.controller, reference - m, y)
  const { older, newer } = heldValues(state.sent, u)
  const plant = carry(held.newer, carry(held.older, state.plant, older + disturbance), newer + disturbance)
  return { next: { plant, controller: next, sent: pushed(state.sent, u) }, y, u }
}

/** All entries of a state in one array: plant, controller, outputs on their way. */
export function flat({ plant, controller, sent }: SampledState): Float64Array {
  return Float64Array.from([...plant, ...controller, ...sent])
}

/** The state with one entry of 1, all others 0. */
export function unitState(held: HeldPlant, controller: SampledController, j: number): SampledState {
  const state = restingState(held, controller)
  const { plant, controller: law, sent } = state
  if (j < plant.length) plant[j] = 1
  else if (j < plant.length + law.length) law[j - plant.length] = 1
  else sent[j - plant.length - law.length] = 1
  return state
}

export function pushed(sent: Float64Array, u: number): Float64Array {
  const result = new Float64Array(sent.length)
  result[0] = u
  result.set(sent.subarray(0, sent.length - 1), 1)
  return result
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0
  for (let i = 0; i < a.length; i++) sum += a[i]! * b[i]!
  return sum
}
