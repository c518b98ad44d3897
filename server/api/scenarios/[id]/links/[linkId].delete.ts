import { revokeLink } from '../../../../database/queries/links'
import { requireScenario } from '../../../../utils/access'
import { notFound } from '../../../../utils/errors'
import { endStreamsOfLink } from '../../../../utils/live'

export default defineEventHandler(async (event) => {
  const { scenario } = await requireScenario(event)
  const linkId = getRouterParam(event, 'linkId') ?? ''
  if (!revokeLink(scenario.id, linkId)) throw notFound('There is no such link on this scenario.')
  endStreamsOfLink(linkId)
  return sendNoContent(event)
})
