import { markLinkUsed, sharedScenario } from '../../../database/queries/links'
import { requireLink } from '../../../utils/access'
import { notFound } from '../../../utils/errors'

export default defineEventHandler((event) => {
  const link = requireLink(event)
  const shared = sharedScenario(link)
  if (shared === undefined) throw notFound()
  markLinkUsed(link)
  return shared
})
