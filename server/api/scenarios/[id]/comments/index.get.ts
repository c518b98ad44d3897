import { commentsOf } from '../../../../database/queries/comments'
import { requireScenario } from '../../../../utils/access'

export default defineEventHandler(async (event) => {
  const { scenario } = await requireScenario(event)
  return { comments: commentsOf(scenario.id) }
})
