import { z } from 'zod'
import { scenarioDocumentSchema } from './document'
import { limits } from './limits'
import { lineOfText } from './text'

const title = lineOfText(limits.title).min(1, 'give the scenario a title')
const machine = lineOfText(limits.machine)
const axis = lineOfText(limits.axis)

export const createScenarioBodySchema = z.strictObject({
  title,
  machine: machine.optional(),
  axis: axis.optional(),
  document: scenarioDocumentSchema,
})

/** A change carries the version it read; a newer version on the server answers 409. */
export const updateScenarioBodySchema = z.strictObject({
  version: z.number().int().min(1),
  title: title.optional(),
  machine: machine.optional(),
  axis: axis.optional(),
  document: scenarioDocumentSchema.optional(),
})

export const scenarioSortKeys = ['title', 'machine', 'axis', 'updatedAt', 'createdAt'] as const

/** `sort` is a column, with a minus sign before it for descending order. */
export const scenarioListQuerySchema = z.strictObject({
  page: z.coerce.number().int().min(1).default(1),
  pageSize: z.coerce.number().int().min(1).max(limits.pageSize.most).default(limits.pageSize.usual),
  sort: z.string().regex(new RegExp(`^-?(${scenarioSortKeys.join('|')})$`), 'unknown column to sort by').default('-updatedAt'),
  search: z.string().trim().max(limits.search).default(''),
  machine: z.string().trim().max(limits.machine).optional(),
  status: z.enum(['draft', 'deleted']).default('draft'),
})

export type CreateScenarioBody = z.infer<typeof createScenarioBodySchema>
export type UpdateScenarioBody = z.infer<typeof updateScenarioBodySchema>
export type ScenarioListQuery = z.infer<typeof scenarioListQuerySchema>

/** A row of the table of scenarios. Times are ISO 8601 strings in UTC. */
export interface ScenarioSummary {
  id: string
  title: string
  machine: string
  axis: string
  status: 'draft' | 'deleted'
  version: number
  ownerName: string
  unresolvedComments: number
  createdAt: string
  updatedAt: string
}

export interface Scenario extends ScenarioSummary {
  document: z.infer<typeof scenarioDocumentSchema>
}

export interface ScenarioPage {
  scenarios: ScenarioSummary[]
  page: number
  pageSize: number
  total: number
}
