import type { Complex } from '../numerics/complex'

/** A rational transfer function: real coefficients in descending powers of s, the leading one of each non-zero. */
export interface TransferFunction {
  numerator: number[]
  denominator: number[]
}

/** The loop around a controller, resolved to rational form. `rateFeedback` is a fixed inner gain on s*y around the plant. */
export interface LoopModel {
  plant: TransferFunction
  rateFeedback: number
}

/** The controller forms; the meaning of each field is fixed by docs/http-contract.md. */
export type Controller =
  | { form: 'gain', shape?: TransferFunction }
  | { form: 'pd' }
  | { form: 'pi' }
  | { form: 'rate' }
  | { form: 'lead', poleZeroRatio: number }

/** Gains of a controller form. `kr` is a rate feedback gain; `zero` and `pole` are places in the s-plane (negative when stable). */
export type Gains =
  | { k: number }
  | { kp: number, kd: number }
  | { kp: number, ki: number }
  | { kp: number, kr: number }
  | { k: number, zero: number, pole: number }

export type ReadingName =
  | 'overshootPercent' | 'settlingTime' | 'riseTime' | 'peakTime' | 'peakEffort'
  | 'steadyStateErrorStep' | 'steadyStateErrorRamp' | 'gainMarginDb' | 'phaseMarginDeg' | 'delayMargin'
  | 'sensitivityPeak' | 'bandwidth' | 'dampingRatio'

export interface Requirement {
  reading: ReadingName
  limit: 'at-most' | 'at-least'
  value: number
}

export interface Verdict extends Requirement {
  /** The reading as computed; null where the figure does not exist. `met` is then false, save for a margin or bandwidth of a stable loop without limit. */
  actual: number | null
  met: boolean
}

export interface LoopAnalysis {
  /** L0: the loop transfer without its overall gain. */
  openLoop: {
    numerator: number[]
    denominator: number[]
    zeros: Complex[]
    poles: Complex[]
    deadTime: number
    type: number
    relativeDegree: number
  }
  asymptotes: { centroid: number, anglesDeg: number[] } | null
  breakaways: { point: Complex, gain: number }[]
  imaginaryAxisCrossings: { frequency: number, gain: number }[]
  departures: { pole: Complex, angleDeg: number }[]
  arrivals: { zero: Complex, angleDeg: number }[]
  /** Intervals of the overall gain; null: no upper limit. */
  stableGain: [number, number | null][]
  /** Each point is [re, im, gain]; a branch is continuous and its gain never falls. */
  branches: { points: [number, number, number][] }[]
  /** Present when a damping ratio was given; nearest the origin first. */
  rayIntersections?: { point: Complex, gain: number }[]
}

export interface Readings {
  finalValue: number | null
  overshootPercent: number | null
  peakTime: number | null
  riseTime: number | null
  settlingTime: number | null
  steadyStateErrorStep: number | null
  steadyStateErrorRamp: number | null
  peakEffort: number | null
  gainMargin: { upper: number | null, lower: number | null }
  gainMarginDb: number | null
  phaseMarginDeg: number | null
  gainCrossover: number | null
  phaseCrossover: number | null
  delayMargin: number | null
  sensitivityPeak: number | null
  bandwidth: number | null
}

export type ResponseInput = 'reference-step' | 'reference-ramp' | 'disturbance-step'

export interface ResponseOptions {
  input?: ResponseInput
  amplitude?: number
  /** Seconds; chosen from the roots when absent. */
  duration?: number
  samples?: number
  settlingBandPercent?: number
}

export interface DesignSolution {
  gains: Gains
  alternatives: Gains[]
  designPoint: Complex & { dampingRatio: number, naturalFrequency: number }
  leftoverAngleDeg: number
  onLocus: boolean
  closedLoopPoles: Complex[]
  closedLoopZeros: Complex[]
  stable: boolean
  response: { input: ResponseInput, time: number[], output: number[], effort: number[] }
  readings: Readings
  /** The second-order rules of thumb at the design point. */
  estimate: { overshootPercent: number | null, peakTime: number | null, settlingTime: number | null, riseTime: number | null }
  /** Not available yet: null. */
  dominance: null
  verdicts: Verdict[]
  unmet: number
}
