import { updateCommentBodySchema } from '#shared/schemas/comment'
import { setResolved } from '../../../../database/queries/comments'
import { requireScenario } from '../../../../utils/access'
import { readValidated } from '../../../../utils/body'
import { notFound } from '../../../../utils/errors'
import { publish } from '../../../../utils/live'

export default defineEventHandler(async (event) => {
  const { scenario } = await requireScenario(event)
  const { resolved } = await readValidated(event, updateCommentBodySchema)
  const comment = setResolved(scenario.id, getRouterParam(event, 'commentId') ?? '', resolved)
  if (comment === undefined) throw notFound('There is no such comment on this scenario.')
  publish(scenario.id, { event: 'comment', data: comment })
  return comment
})
