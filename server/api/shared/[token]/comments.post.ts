import { createGuestCommentBodySchema } from '#shared/schemas/comment'
import { requireLink } from '../../../utils/access'
import { currentUser } from '../../../utils/auth'
import { readValidated } from '../../../utils/body'
import { badRequest, failure } from '../../../utils/errors'
import { limit } from '../../../utils/limits'
import { postComment } from '../../../utils/post-comment'

export default defineEventHandler(async (event) => {
  const link = requireLink(event)
  if (link.permission !== 'comment') throw failure(403, 'This link lets you look, not comment.')
  await limit(event, 'guestComment')
  const { name, ...body } = await readValidated(event, createGuestCommentBodySchema)
  const user = await currentUser(event)
  if (user === undefined && name === undefined) throw badRequest([{ path: 'name', message: 'tell who you are' }])
  setResponseStatus(event, 201)
  return postComment(link.scenarioId, user ? { userId: user.id } : { guestName: name ?? '', linkId: link.id }, body)
})
