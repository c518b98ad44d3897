import { deleteScenario } from '../../../database/queries/scenarios'
import { requireScenario } from '../../../utils/access'
import { notFound } from '../../../utils/errors'
import { endStreamsOfScenario } from '../../../utils/live'

export default defineEventHandler(async (event) => {
  const { teamIds, scenario } = await requireScenario(event)
  if (!deleteScenario({ teamIds }, scenario.id)) throw notFound()
  endStreamsOfScenario(scenario.id)
  return sendNoContent(event)
})
