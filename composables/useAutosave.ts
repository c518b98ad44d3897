import type { ScenarioDocument } from '#shared/schemas/document'
import type { Scenario } from '#shared/schemas/scenario'
import { toComplex } from '~/utils/bench/bench-document'
import { saveMachine, type SaveState, type Snapshot } from '~/utils/save-machine'

/**
 * Saves the scenario on the bench for as long as the calling component lives (see `saveMachine`). Until the server has acknowledged a change it
 * is also kept in the browser.
 */
export function useAutosave({ scenarioId, draftKey }: { scenarioId: string, draftKey: string }) {
  const bench = useBenchStore()
  const state = shallowRef<SaveState>({ kind: 'saved' })

  const machine = saveMachine({
    saved: acknowledged(),
    version: bench.version!,
    send: (version, sent) => callApi<Scenario>(`/api/scenarios/${scenarioId}`, { method: 'PATCH', body: { version, ...sent } }),
    keep: (version, { document, ...names }) => keepDraft(localStorage, draftKey, { ...names, document, version }),
    drop: () => dropDraft(localStorage, draftKey),
    show: (shown) => { state.value = shown },
    onSaved: ({ id, version }, { document }) => bench.markSaved({ id, version, document }),
  })

  /** What the server has: work may have gone on since it was sent, while this page was still on its way. */
  function acknowledged(): Snapshot {
    const { document, title, machine, axis } = bench.baseline ?? bench
    return { document: toRaw(document), title, machine, axis }
  }

  function snapshot(): Snapshot {
    return { document: toRaw(bench.document), title: bench.title, machine: bench.machine, axis: bench.axis }
  }

  /** Another scenario may stand on the bench before this one's page is gone. */
  function tell() {
    if (bench.scenarioId === scenarioId) machine.changed(snapshot(), bench.gestureStart === null)
  }

  function put({ document, title, machine, axis }: Pick<Scenario, 'document' | 'title' | 'machine' | 'axis'>) {
    bench.change(draft => Object.assign(draft, document, { designPoint: toComplex(document.designPoint) }))
    bench.title = title
    bench.machine = machine
    bench.axis = axis
  }

  /** Changes that never reached the server come back to the bench. */
  function takeUp(draft: LocalDraft, document: ScenarioDocument, present: Scenario) {
    machine.resume(draft.version ?? 0, present)
    put({ title: draft.title, machine: draft.machine, axis: draft.axis, document })
  }

  /** A version from the server goes on the bench as it is; what stood there stays reachable by undo. */
  function accept(newer: Scenario) {
    put(newer)
    const now = snapshot()
    bench.markSaved({ id: newer.id, version: newer.version, document: now.document })
    machine.accept(newer.version, now)
  }

  /** Saves what is on the bench now; answers whether the server has it all. */
  async function flush(): Promise<boolean> {
    tell()
    await machine.flush()
    return machine.settled()
  }

  function onUnload(event: BeforeUnloadEvent) {
    tell()
    if (!machine.settled()) event.preventDefault()
  }

  const onOnline = () => { if (state.value.kind === 'failed') void machine.save() }

  watch(() => [bench.document, bench.title, bench.machine, bench.axis, bench.gestureStart], tell)
  onMounted(() => {
    tell()
    addEventListener('beforeunload', onUnload)
    addEventListener('online', onOnline)
  })
  onScopeDispose(() => {
    machine.stop()
    if (import.meta.server) return
    removeEventListener('beforeunload', onUnload)
    removeEventListener('online', onOnline)
  })

  return { state, flush, takeUp, accept, keepMine: machine.keepMine, stop: machine.stop }
}
