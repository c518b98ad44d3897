import { updateScenarioBodySchema } from '#shared/schemas/scenario'
import { scenarioById, updateScenario } from '../../../database/queries/scenarios'
import { requireScenario } from '../../../utils/access'
import { readValidated } from '../../../utils/body'
import { failure, notFound } from '../../../utils/errors'
import { publish } from '../../../utils/live'

export default defineEventHandler(async (event) => {
  const { user, teamIds, scenario } = await requireScenario(event)
  const body = await readValidated(event, updateScenarioBodySchema)
  const result = updateScenario({ teamIds }, user.id, scenario.id, body)
  if (result === undefined) throw notFound()
  if (result === 'changed') {
    throw failure(409, 'Somebody saved a newer version since you read this one; nothing was overwritten.', {
      current: scenarioById({ teamIds }, scenario.id),
    })
  }
  publish(scenario.id, { event: 'scenario', data: { version: result.version, updatedAt: result.updatedAt } })
  return result
})
