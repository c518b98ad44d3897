import type { Scenario } from '#shared/schemas/scenario'

export interface SaveDetails {
  title: string
  machine: string
  axis: string
}

const storageKey = 'polewright:save-intent'

/**
 * Saving asks for an account: what the person wanted to save it as survives the trip to the account pages (a reload there
 * included), and so does the bench itself. After signing in the save is carried out.
 */
export function useSaveIntent() {
  const wanted = useState<SaveDetails | null>('save-intent', () => null)
  const bench = useBenchStore()
  const route = useRoute()

  function want(details: SaveDetails) {
    wanted.value = details
    sessionStorage.setItem(storageKey, JSON.stringify(details))
  }

  function forget() {
    wanted.value = null
    sessionStorage.removeItem(storageKey)
  }

  /** After a reload of an account page: the wish and the bench come back from the browser's store. */
  async function restore() {
    if (wanted.value !== null) return
    const stored = readDetails(sessionStorage.getItem(storageKey))
    if (stored !== null && await useDemoDraft().restore() !== null) wanted.value = stored
  }

  /** Puts the bench under "My scenarios" and returns the new scenario. */
  async function saveAsNew(details: SaveDetails): Promise<Scenario> {
    const document = toRaw(bench.document)
    const wasDemo = bench.mode === 'demo'
    const scenario = await callApi<Scenario>('/api/scenarios', { method: 'POST', body: { ...details, document } })
    bench.title = scenario.title
    bench.machine = scenario.machine
    bench.axis = scenario.axis
    bench.markSaved({ id: scenario.id, version: scenario.version, document })
    if (wasDemo) dropDraft(localStorage, demoDraftKey)
    forget()
    return scenario
  }

  /** Called after registering or signing in: saves what was waiting, or goes back to where the person came from. */
  async function goOn() {
    if (wanted.value === null) return navigateTo(returnAddress(route.query.to))
    try {
      const scenario = await saveAsNew(wanted.value)
      return navigateTo(`/scenarios/${scenario.id}`)
    } catch {
      // Signed in, yet not saved: back to the bench, where the save dialog opens again and says why.
      return navigateTo({ path: '/', query: { save: '1' } })
    }
  }

  return { wanted, want, forget, restore, saveAsNew, goOn }
}

function readDetails(text: string | null): SaveDetails | null {
  try {
    const { title, machine, axis } = JSON.parse(text ?? 'null') as Record<keyof SaveDetails, unknown>
    return typeof title === 'string' && typeof machine === 'string' && typeof axis === 'string' ? { title, machine, axis } : null
  } catch {
    return null
  }
}
