import { z } from 'zod'
import type { ScenarioDocument } from './document'

export const createLinkBodySchema = z.strictObject({
  permission: z.enum(['view', 'comment']),
  expiresAt: z.iso.datetime({ message: 'an instant as ISO 8601 in UTC, such as 2030-01-31T12:00:00Z' })
    .refine(instant => Date.parse(instant) > Date.now(), 'the expiry lies in the past').optional(),
})

export type CreateLinkBody = z.infer<typeof createLinkBodySchema>
export type LinkPermission = CreateLinkBody['permission']

export interface ShareLink {
  id: string
  token: string
  url: string
  permission: LinkPermission
  expiresAt: string | null
  createdAt: string
  lastUsedAt: string | null
}

/** All that a visitor with a link may see: an allow-list, filled field by field. */
export interface SharedScenario {
  title: string
  machine: string
  axis: string
  ownerName: string
  version: number
  updatedAt: string
  permission: LinkPermission
  document: ScenarioDocument
}
