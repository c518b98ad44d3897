import type { Complex } from '../../numerics/complex'
import { describePoint } from '../design-point'
import { NoAnswerError } from '../errors'
import { solveDesign, type DesignTarget } from '../solve'
import type { Controller, Gains, LoopModel, Requirement, ResponseOptions, Verdict } from '../types'
import { shortfall } from '../verdicts'
import type { Candidate, Hindrance } from './types'

/** The loop to be made fast, and what it has to meet. */
export interface Problem {
  model: LoopModel
  controller: Controller
  requirements: readonly Requirement[]
  /** Height and settling band of the step that the readings describe. */
  response: Pick<ResponseOptions, 'amplitude' | 'settlingBandPercent'>
}

/** One design, evaluated. Where it has no answer at all `gains` is null and `designPoint` the point asked for. */
export interface Trial {
  designPoint: Complex
  gains: Gains | null
  /** Why it cannot be a best point, whatever is required; null: it can. */
  hindrance: Hindrance | null
  settlingTime: number | null
  verdicts: Verdict[]
  unmet: number
  /** By how much the broken requirements are missed, each as a share of its limit, in sum. */
  shortfall: number
}

/** Whether one trial is to be preferred to another. */
export type Order = (one: Trial, other: Trial) => boolean

/** Evaluates a design by the one door that everything else goes through; two samples of the response, since only its figures are wanted. */
export function evaluate({ model, controller, requirements, response }: Problem, target: DesignTarget, timeScale: number): Trial {
  const { amplitude, settlingBandPercent } = response
  try {
    const { gains, designPoint, stable, readings, verdicts, unmet } = solveDesign(model, controller, target, {
      requirements, response: { amplitude, settlingBandPercent, samples: 2, duration: timeScale },
    })
    const { settlingTime } = readings
    const hindrance = !stable ? unstable : hasNegative(gains) ? negativeGain : settlingTime === null ? unsettled : null
    return { designPoint, gains, hindrance, settlingTime, verdicts, unmet, shortfall: verdicts.reduce((sum, verdict) => sum + shortfall(verdict), 0) }
  }
  catch (error) {
    if (!(error instanceof NoAnswerError)) throw error
    const designPoint = 'designPoint' in target ? target.designPoint : { re: 0, im: 0 }
    return {
      designPoint, gains: null, hindrance: { kind: 'unreachable', message: error.message }, settlingTime: null, verdicts: [], unmet: Infinity, shortfall: Infinity,
    }
  }
}

const unstable: Hindrance = { kind: 'unstable' }
const negativeGain: Hindrance = { kind: 'negative-gain' }
const unsettled: Hindrance = { kind: 'unsettled' }

function hasNegative(gains: Gains): boolean {
  return Object.entries(gains).some(([name, value]) => name !== 'zero' && name !== 'pole' && value < 0)
}

export function meetsAll(trial: Trial): boolean {
  return trial.hindrance === null && trial.unmet === 0
}

/** The faster of two that meet everything; whoever does before who does not; the smaller shortfall leads to where everything may be met. */
export const isBetter: Order = (one, other) => {
  if (one.hindrance !== null) return false
  if (other.hindrance !== null) return true
  if (one.shortfall !== other.shortfall && (one.unmet > 0 || other.unmet > 0)) return one.shortfall < other.shortfall
  return one.settlingTime! < other.settlingTime!
}

/** Fewest requirements broken, then the smallest shortfall. */
export const isCloser: Order = (one, other) => {
  if (one.hindrance !== null) return false
  return other.hindrance !== null || one.unmet < other.unmet || (one.unmet === other.unmet && isBetter(one, other))
}

export function toCandidate({ designPoint, gains, settlingTime, verdicts }: Trial): Candidate {
  return { designPoint: describePoint(designPoint), gains: gains!, settlingTime, verdicts }
}
