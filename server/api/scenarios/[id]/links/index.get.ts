import { linksOf } from '../../../../database/queries/links'
import { requireScenario } from '../../../../utils/access'
import { toShareLink } from '../../../../utils/share-url'

export default defineEventHandler(async (event) => {
  const { scenario } = await requireScenario(event)
  return { links: linksOf(scenario.id).map(link => toShareLink(event, link)) }
})
