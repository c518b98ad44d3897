import { z } from 'zod'
import { complexSchema, finiteNumber } from './complex'
import { limits } from './limits'
import { faultOfName } from './names'
import { lineOfText } from './text'

const order = limits.plantOrder
const coefficients = (what: string) =>
  z.array(finiteNumber).min(1, `${what} needs at least one coefficient`).max(order + 1, `${what} may have order ${order} at most`)

export const parameterSchema = z.strictObject({
  value: finiteNumber,
  unit: lineOfText(limits.parameterUnit).optional(),
  tolerancePercent: z.number().min(0).max(100).optional(),
})

/** A name that the formula may use. */
export const parameterNameSchema = z.string().check(({ value, issues }) => {
  const fault = faultOfName(value)
  if (fault !== null) issues.push({ code: 'custom', input: value, message: fault })
})

export const plantSchema = z.discriminatedUnion('form', [
  z.strictObject({
    form: z.literal('expression'),
    expression: z.string().trim().min(1, 'type the formula of the plant').max(limits.expressionLength),
    parameters: z.record(parameterNameSchema, parameterSchema)
      .refine(parameters => Object.keys(parameters).length <= limits.parameters, `at most ${limits.parameters} parameters`)
      .default({}),
  }),
  z.strictObject({
    form: z.literal('coefficients'),
    numerator: coefficients('the numerator'),
    denominator: coefficients('the denominator'),
  }),
  z.strictObject({
    form: z.literal('zeros-poles-gain'),
    zeros: z.array(complexSchema).max(order),
    poles: z.array(complexSchema).max(order),
    gain: finiteNumber,
  }),
])

const transferFunctionSchema = z.strictObject({
  numerator: coefficients('the numerator'),
  denominator: coefficients('the denominator'),
})

export const loopSchema = z.strictObject({
  plant: plantSchema,
  sensor: plantSchema.optional(),
  rateFeedback: finiteNumber.optional(),
  deadTime: z.number().min(0, 'a dead time is 0 or greater').optional(),
  actuatorLimit: z.number().positive('a limit is greater than 0; leave it out where there is none').optional(),
  samplePeriod: z.number().positive('a sample period is greater than 0; leave it out for a continuous controller').optional(),
  computingDelay: z.enum(['none', 'one-sample']).optional(),
}).refine(loop => loop.computingDelay === undefined || loop.samplePeriod !== undefined, {
  path: ['computingDelay'], message: 'a computing delay belongs to a sampled controller: give its samplePeriod too',
})

/** Seconds; absent: an ideal derivative. */
const derivativeFilter = z.number().positive('a filter time is greater than 0; leave it out for an ideal derivative').optional()

/** Which of several gains that reach the design point are wanted; 0 or absent: the first. */
const alternative = z.int().min(0).max(limits.alternative, `at most ${limits.alternative}: no form has more gains for one point`).optional()

export const controllerSchema = z.discriminatedUnion('form', [
  z.strictObject({ form: z.literal('gain'), shape: transferFunctionSchema.optional() }),
  z.strictObject({ form: z.literal('pd'), derivativeFilter }),
  z.strictObject({ form: z.literal('pi') }),
  z.strictObject({ form: z.literal('rate') }),
  z.strictObject({
    form: z.literal('pid'),
    derivativeFilter,
    integralToDerivativeRatio: z.number().positive().optional(),
    thirdPole: z.number().lt(0, 'the third pole is negative').optional(),
    alternative,
  }),
  z.strictObject({ form: z.literal('lead'), poleZeroRatio: z.number().gt(1, 'the pole-zero ratio of a lead is greater than 1'), alternative }),
  z.strictObject({
    form: z.literal('lag'),
    poleZeroRatio: z.number().gt(0).lt(1, 'the pole-zero ratio of a lag lies between 0 and 1'),
    zero: z.number().lt(0, 'the zero of a lag is negative'),
  }),
])

export type Parameter = z.infer<typeof parameterSchema>
export type Plant = z.infer<typeof plantSchema>
export type Loop = z.infer<typeof loopSchema>
export type ControllerForm = z.infer<typeof controllerSchema>
