import { createCommentBodySchema } from '#shared/schemas/comment'
import { requireScenario } from '../../../../utils/access'
import { readValidated } from '../../../../utils/body'
import { postComment } from '../../../../utils/post-comment'

export default defineEventHandler(async (event) => {
  const { user, scenario } = await requireScenario(event)
  const body = await readValidated(event, createCommentBodySchema)
  setResponseStatus(event, 201)
  return postComment(scenario.id, { userId: user.id }, body)
})
