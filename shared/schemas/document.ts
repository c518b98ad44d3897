import { z } from 'zod'
import { designPointSchema, requirementsSchema } from './design'
import { limits } from './limits'
import { controllerSchema, loopSchema } from './loop'

/** What is saved and shared: one loop with its design point, requirements and notes. */
export const scenarioDocumentSchema = z.strictObject({
  loop: loopSchema,
  controller: controllerSchema,
  designPoint: designPointSchema,
  requirements: requirementsSchema,
  notes: z.string().max(limits.notes).default(''),
})

export type ScenarioDocument = z.infer<typeof scenarioDocumentSchema>
