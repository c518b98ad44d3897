import { commentsOf } from '../../../database/queries/comments'
import { requireLink } from '../../../utils/access'

export default defineEventHandler(event => ({ comments: commentsOf(requireLink(event).scenarioId) }))
