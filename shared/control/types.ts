import type { Complex } from '../numerics/complex'

/** A rational transfer function: real coefficients in descending powers of s, the leading one of each non-zero. */
export interface TransferFunction {
  numerator: number[]
  denominator: number[]
}

/** A transfer function followed by a dead time: g(s) e^(-s deadTime). */
export interface DelayedFunction extends TransferFunction {
  /** Seconds, 0 for none. */
  deadTime: number
}

/**
 * The loop around a controller, resolved to rational form. `rateFeedback` is a fixed inner gain on s*y around the plant; the sensor stands in the
 * outer feedback path, unity where it is absent.
 */
export interface LoopModel {
  plant: TransferFunction
  sensor?: TransferFunction
  rateFeedback: number
  /** Seconds between controller output and plant input; 0 where absent. */
  deadTime?: number
  /** The controller output goes to the plant within +- this; no limit where absent. */
  actuatorLimit?: number
  /** The controller runs at instants a period apart, its output held between; continuous where absent. */
  sampling?: Sampling
}

export interface Sampling {
  /** Seconds. */
  period: number
  /** Whether an output takes effect one period after the sample that it was computed from. */
  computingDelay: boolean
}

/**
 * The controller forms; the meaning of each field is fixed by docs/http-contract.md. `alternative` tells which of several gains that reach the
 * point are wanted, 0 the first.
 */
export type Controller =
  | { form: 'gain', shape?: TransferFunction }
  | { form: 'pd', derivativeFilter?: number }
  | { form: 'pi' }
  | { form: 'rate' }
  | { form: 'lead', poleZeroRatio: number, alternative?: number }
  | { form: 'lag', poleZeroRatio: number, zero: number }
  | { form: 'pid', derivativeFilter?: number, third: ThirdCondition, alternative?: number }

/** What settles the third gain of a PID: the ratio of integral to derivative time, or the place (rad/s) of a real closed-loop root. */
export type ThirdCondition = { integralToDerivativeRatio: number } | { pole: number }

/** Gains of a controller form. `kr` is a rate feedback gain; `zero` and `pole` are places in the s-plane (negative when stable). */
export type Gains =
  | { k: number }
  | { kp: number, kd: number }
  | { kp: number, ki: number }
  | { kp: number, kr: number }
  | { kp: number, ki: number, kd: number }
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

/** From and to. */
export type Interval = [number, number]

/** Factors on the present overall gain, between 1e-3 and 1e3. */
export interface GainWindow {
  /** Where every requirement is met. */
  window: Interval[]
  byRequirement: (Requirement & { intervals: Interval[] })[]
  /** The readings whose requirements end the window about the present gain; null: none does. */
  tightest: { below: ReadingName | null, above: ReadingName | null }
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

/**
 * Every reading of the closed loop: figures of the response to the reference step, then figures of the loop transfer L and of T = r to y. Null where a
 * figure does not exist; the definitions are those of docs/method.md.
 */
export interface Readings {
  /** The limit of the output, in its unit. */
  finalValue: number | null
  /** Percent of the final value by which the largest value exceeds it; 0 when it never does. */
  overshootPercent: number | null
  /** Seconds to that largest value; null without overshoot. */
  peakTime: number | null
  /** Seconds from first reaching 10 % to first reaching 90 % of the final value. */
  riseTime: number | null
  /** Seconds to the last instant outside the settling band (2 % of the final value unless asked otherwise). */
  settlingTime: number | null
  /** What r - y tends to after the step, in the unit of the output, signed. */
  steadyStateErrorStep: number | null
  /** What r - y tends to after a ramp of the amplitude per second, signed; null where it grows. */
  steadyStateErrorRamp: number | null
  /** Largest |controller output|, in its unit; null where a derivative makes it an impulse. */
  peakEffort: number | null
  /** Factors on the overall gain at which the loop stands on the border of stability, above and below 1; null: none that way. */
  gainMargin: { upper: number | null, lower: number | null }
  /** The one of both that is nearer to 0, in dB: negative when it lies below. */
  gainMarginDb: number | null
  /** Degrees, signed: the smallest |180 + arg L| over all gain crossovers. */
  phaseMarginDeg: number | null
  /** rad/s: the gain crossover of that phase margin. */
  gainCrossover: number | null
  /** rad/s: where arg L is -180 degrees, for the gain margin in dB; null where that lies at infinity. */
  phaseCrossover: number | null
  /** Seconds: the least dead time that makes a stable loop unstable; negative in an unstable loop whose phase margin is. */
  delayMargin: number | null
  /** The largest |1/(1 + L(jw))|, w >= 0. */
  sensitivityPeak: number | null
  /** rad/s: the first frequency at which |T| has fallen 3 dB below |T(0)|. */
  bandwidth: number | null
}

/** What rounding may move further than its stated accuracy: a reading, the roots, or whether the loop is stable at all. */
export type UncertainFigure = keyof Readings | 'stable' | 'closedLoopPoles'

export type ResponseInput = 'reference-step' | 'reference-ramp' | 'disturbance-step'

export interface ResponseOptions {
  input?: ResponseInput
  amplitude?: number
  /** Seconds; chosen from the roots when absent. */
  duration?: number
  samples?: number
  settlingBandPercent?: number
}

export interface SampledSignals {
  input: ResponseInput
  time: number[]
  output: number[]
  effort: number[]
  /** With an actuator limit: seconds until which it cut the controller output off, 0 where it never did; null: it does so for ever. */
  limitedUntil?: number | null
}

/** How far the pair nearest the design point speaks for the whole loop; the definitions are those of docs/method.md. */
export interface Dominance {
  sentence: string
  /** Weight of the pair over that of all roots in the step response, 0..1; null where the response does not come to rest. */
  residueShare: number | null
  /** Real part of the slowest other root over that of the pair; null where there is none. */
  nextPoleRatio: number | null
  /** rad/s from the pair to the nearest closed-loop zero; null where there is none. */
  nearestZeroDistance: number | null
}

/** Type and error constants of the unity-feedback loop with the same error r - y; a constant is null where it is infinite. */
export interface SteadyState {
  /** Free integrators; null where the error is 0 at all times. */
  type: number | null
  /** Kp, Kv in 1/s, Ka in 1/s^2. */
  positionConstant: number | null
  velocityConstant: number | null
  accelerationConstant: number | null
  /** What r - y tends to after a parabola amplitude t^2/2, signed; null where it grows or the loop is unstable. */
  errorParabola: number | null
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
  response: SampledSignals
  readings: Readings
  /** The second-order rules of thumb at the design point. */
  estimate: { overshootPercent: number | null, peakTime: number | null, settlingTime: number | null, riseTime: number | null }
  /** null where the loop has no root. */
  dominance: Dominance | null
  steadyState: SteadyState
  verdicts: Verdict[]
  unmet: number
  /** Figures that may not be good to the accuracy of docs/method.md. */
  uncertain: UncertainFigure[]
  /** Present with a sampled controller: the same gains in the loop as it was designed, without sampling. */
  continuous?: ContinuousDesign
}

export interface ContinuousDesign {
  stable: boolean
  closedLoopPoles: Complex[]
  /** At the instants of the response beside it. */
  response: SampledSignals
  readings: Readings
}

/** A loop over frequency: L, S = 1/(1 + L) and T = L/(1 + L), broken at the plant input. Lists of one length. */
export interface FrequencyResponse {
  /** rad/s, rising. */
  frequency: number[]
  magnitudeDb: number[]
  /** Degrees, unwrapped. */
  phaseDeg: number[]
  sensitivityDb: number[]
  complementaryDb: number[]
  /** rad/s: where |S| is largest; null where that is at 0, at infinity or infinite. */
  sensitivityPeakFrequency: number | null
}
