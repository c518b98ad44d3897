import { z } from 'zod'

/** z.number() refuses NaN and infinities. */
export const finiteNumber = z.number()

export const complexSchema = z.strictObject({ re: finiteNumber, im: finiteNumber })
