import { deleteScenario } from '../../../database/queries/scenarios'
import { requireScenario } from '../../../utils/access'
import { notFound } from '../../../utils/errors'
import { endStreamsOfScenario, publish } from '../../../utils/live'

export default defineEventHandler(async (event) => {
  const { teamIds, scenario } = await requireScenario(event)
  if (!deleteScenario({ teamIds }, scenario.id)) throw notFound()
  publish(scenario.id, { event: 'scenario', data: { deleted: true } })
  endStreamsOfScenario(scenario.id)
  return sendNoContent(event)
})
