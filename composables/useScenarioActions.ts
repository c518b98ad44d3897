import type { Scenario, ScenarioSummary } from '#shared/schemas/scenario'

/** What can be done to a scenario from the table. Failures are told and change nothing; deleting can be undone. */
export function useScenarioActions(options: { refresh: () => Promise<void> }) {
  const toasts = useToasts()

  async function attempt(what: string, act: () => Promise<unknown>) {
    try {
      await act()
    } catch (thrown) {
      toasts.show(`${what} did not work: ${readFailure(thrown).message}`)
    }
    await options.refresh()
  }

  function remove(scenario: ScenarioSummary) {
    return attempt('Deleting', async () => {
      await callApi(`/api/scenarios/${scenario.id}`, { method: 'DELETE' })
      toasts.show(`“${scenario.title}” was deleted.`, { label: 'Undo', run: () => restore(scenario) })
    })
  }

  function restore(scenario: ScenarioSummary) {
    return attempt('Restoring', () => callApi(`/api/scenarios/${scenario.id}/restore`, { method: 'POST', body: {} }))
  }

  function duplicate(scenario: ScenarioSummary) {
    return attempt('Duplicating', async () => {
      const twin = await callApi<Scenario>(`/api/scenarios/${scenario.id}/duplicate`, { method: 'POST', body: {} })
      toasts.show(`“${twin.title}” is there.`, { label: 'Open', run: async () => { await navigateTo(`/scenarios/${twin.id}`) } })
    })
  }

  return { remove, restore, duplicate }
}
