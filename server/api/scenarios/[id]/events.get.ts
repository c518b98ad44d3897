import { scenarioById } from '../../../database/queries/scenarios'
import { requireScenario } from '../../../utils/access'
import { currentUser } from '../../../utils/auth'
import { watch } from '../../../utils/live'

export default defineEventHandler(async (event) => {
  const { teamIds, scenario } = await requireScenario(event)
  return watch(event, { scenarioId: scenario.id }, async () =>
    await currentUser(event) !== undefined && scenarioById({ teamIds }, scenario.id) !== undefined)
})
