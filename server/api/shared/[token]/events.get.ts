import { linkByToken } from '../../../database/queries/links'
import { requireLink } from '../../../utils/access'
import { watch } from '../../../utils/live'

export default defineEventHandler((event) => {
  const link = requireLink(event)
  return watch(event, { scenarioId: link.scenarioId, linkId: link.id }, () => linkByToken(link.token) !== undefined)
})
