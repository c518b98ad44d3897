import { z } from 'zod'
import type { DesignSolution } from '../control/types'
import { complexSchema, finiteNumber } from './complex'
import { limits } from './limits'
import { controllerSchema, loopSchema } from './loop'

export const dampingRatioSchema = z.number().gt(0, 'the damping ratio is greater than 0').max(1, 'the damping ratio is at most 1')

export const designPointSchema = z.union([
  complexSchema.refine(point => point.im >= 0, { path: ['im'], message: 'a design point has im >= 0; its conjugate is implied' }),
  z.strictObject({
    dampingRatio: z.number().gt(-1, 'the damping ratio is greater than -1').max(1, 'the damping ratio is at most 1'),
    naturalFrequency: z.number().positive(),
  }),
])

export const readingNames = [
  'overshootPercent', 'settlingTime', 'riseTime', 'peakTime', 'peakEffort', 'steadyStateErrorStep', 'steadyStateErrorRamp',
  'gainMarginDb', 'phaseMarginDeg', 'delayMargin', 'sensitivityPeak', 'bandwidth', 'dampingRatio',
] as const

export const requirementSchema = z.strictObject({
  reading: z.enum(readingNames),
  limit: z.enum(['at-most', 'at-least']),
  value: finiteNumber,
})

export const requirementsSchema = z.array(requirementSchema).max(limits.requirements, `at most ${limits.requirements} requirements`)

export const gainsSchema = z.union([
  z.strictObject({ k: finiteNumber }),
  z.strictObject({ kp: finiteNumber, kd: finiteNumber }),
  z.strictObject({ kp: finiteNumber, ki: finiteNumber }),
  z.strictObject({ kp: finiteNumber, kr: finiteNumber }),
  z.strictObject({ kp: finiteNumber, ki: finiteNumber, kd: finiteNumber }),
  z.strictObject({ k: finiteNumber, zero: finiteNumber, pole: finiteNumber }),
])

const samplesSchema = z.number().int().min(limits.samples.least).max(limits.samples.most)

export const responseOptionsSchema = z.strictObject({
  input: z.enum(['reference-step', 'reference-ramp', 'disturbance-step']).optional(),
  amplitude: finiteNumber.refine(amplitude => amplitude !== 0, 'the amplitude is not zero').optional(),
  duration: z.number().positive().optional(),
  samples: samplesSchema.optional(),
  settlingBandPercent: z.number().gt(0).lt(100).optional(),
})

export const analyzeBodySchema = z.strictObject({
  loop: loopSchema,
  controller: controllerSchema,
  dampingRatio: dampingRatioSchema.optional(),
  gains: gainsSchema.optional(),
})

/** A loop and where its design stands, which exactly one of designPoint and gains says. */
const placedLoop = {
  loop: loopSchema,
  controller: controllerSchema,
  designPoint: designPointSchema.optional(),
  gains: gainsSchema.optional(),
}
const standsOnce = (body: { designPoint?: unknown, gains?: unknown }) => (body.designPoint === undefined) !== (body.gains === undefined)
const standsTwice = { path: ['designPoint'], message: 'give either designPoint or gains' }

export const solveBodySchema = z.strictObject({
  ...placedLoop,
  requirements: requirementsSchema.default([]),
  response: responseOptionsSchema.optional(),
}).refine(standsOnce, standsTwice)

const frequency = z.number().min(limits.frequency.least).max(limits.frequency.most)

export const frequencyBodySchema = z.strictObject({
  ...placedLoop,
  from: frequency.optional(),
  to: frequency.optional(),
  samples: samplesSchema.optional(),
}).refine(standsOnce, standsTwice)
  .refine(({ from, to }) => from === undefined || to === undefined || from < to, { path: ['to'], message: 'the range ends above where it begins' })

export type DesignPointInput = z.infer<typeof designPointSchema>
export type RequirementInput = z.infer<typeof requirementSchema>
export type AnalyzeBody = z.infer<typeof analyzeBodySchema>
export type SolveBody = z.infer<typeof solveBodySchema>
export type FrequencyBody = z.infer<typeof frequencyBodySchema>

/** The unit of each gain in SI units, such as `A` or `V s/m`; empty: a plain number; null: the plant does not tell. Zero and pole are in rad/s. */
export type GainUnits = Readonly<Record<string, string | null>>

/** What POST /api/design/solve answers. */
export type SolveAnswer = DesignSolution & { gainUnits: GainUnits }
