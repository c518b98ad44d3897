import { z } from 'zod'
import { complexSchema, finiteNumber } from './complex'
import { designPointSchema, readingNames } from './design'
import { limits } from './limits'
import { visibleName } from './text'

export const anchorSchema = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('plane'), ...complexSchema.shape }),
  z.strictObject({ kind: z.literal('response'), time: finiteNumber.min(0) }),
  z.strictObject({ kind: z.literal('reading'), reading: z.enum(readingNames) }),
  z.strictObject({ kind: z.literal('requirement'), index: z.number().int().min(0).max(limits.requirements - 1) }),
])

export const createCommentBodySchema = z.strictObject({
  body: z.string().trim().min(1, 'write a comment').max(limits.comment),
  anchor: anchorSchema.optional(),
  designPoint: designPointSchema.optional(),
  parentId: z.string().max(40).optional(),
})

/** A guest gives a name; a signed-in visitor's own name is used. */
export const createGuestCommentBodySchema = createCommentBodySchema.extend({
  name: visibleName(limits.name, 'tell who you are').optional(),
})

export const updateCommentBodySchema = z.strictObject({ resolved: z.boolean() })

export type Anchor = z.infer<typeof anchorSchema>
export type CreateCommentBody = z.infer<typeof createCommentBodySchema>
export type CreateGuestCommentBody = z.infer<typeof createGuestCommentBodySchema>

export interface Comment {
  id: string
  parentId: string | null
  authorName: string
  /** True for a guest who came by a link. */
  guest: boolean
  body: string
  anchor: Anchor | null
  designPoint: z.infer<typeof designPointSchema> | null
  resolved: boolean
  createdAt: string
}
