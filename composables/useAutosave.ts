import type { ScenarioDocument } from '#shared/schemas/document'
import type { Scenario } from '#shared/schemas/scenario'
import { toComplex, type BenchDocument } from '~/stores/bench'

export type SaveState =
  | { kind: 'saved' }
  | { kind: 'pending' }
  | { kind: 'saving' }
  | { kind: 'failed', failure: ApiFailure }
  | { kind: 'conflict', theirs: Scenario }

interface Snapshot {
  document: BenchDocument
  title: string
  machine: string
  axis: string
}

const quietMs = 700
const retryMs = [2_000, 4_000, 8_000, 15_000, 30_000]

/**
 * Saves the scenario on the bench whenever the hand rests. Each save carries the version it began from; when somebody else was
 * faster the state becomes `conflict` and nothing is written until the person has chosen. Until the server has acknowledged a
 * change it is also kept in the browser.
 */
export function useAutosave(options: { draftKey: string }) {
  const bench = useBenchStore()
  const state = shallowRef<SaveState>({ kind: 'saved' })
  let acknowledged = snapshot()
  let timer: ReturnType<typeof setTimeout> | undefined
  let running: Promise<void> | null = null
  let failures = 0
  let stopped = false

  function snapshot(): Snapshot {
    return { document: toRaw(bench.document), title: bench.title, machine: bench.machine, axis: bench.axis }
  }

  function changedSince(before: Snapshot): boolean {
    const now = snapshot()
    return now.document !== before.document || now.title !== before.title || now.machine !== before.machine || now.axis !== before.axis
  }

  function schedule(afterMs: number) {
    clearTimeout(timer)
    timer = setTimeout(() => void save(), afterMs)
  }

  function onChange() {
    if (stopped) return
    if (!changedSince(acknowledged)) {
      if (state.value.kind === 'pending') settle()
      return
    }
    keepLocally()
    if (state.value.kind === 'conflict') return
    state.value = { kind: 'pending' }
    if (bench.gestureStart === null) schedule(quietMs)
  }

  function keepLocally() {
    keepDraft(localStorage, options.draftKey, { ...snapshot(), version: bench.version, keptAt: new Date().toISOString() })
  }

  function settle() {
    clearTimeout(timer)
    dropDraft(localStorage, options.draftKey)
    state.value = { kind: 'saved' }
  }

  /** One save at a time; a change that came meanwhile is saved right after. */
  function save(): Promise<void> {
    running ??= send().finally(() => { running = null })
    return running
  }

  async function send() {
    clearTimeout(timer)
    if (state.value.kind === 'conflict' || settled()) return
    const sent = snapshot()
    state.value = { kind: 'saving' }
    try {
      const answer = await callApi<Scenario>(`/api/scenarios/${bench.scenarioId}`, {
        method: 'PATCH', body: { version: bench.version, ...sent },
      })
      acknowledge(sent, answer)
    } catch (thrown) {
      fail(readFailure(thrown))
    }
  }

  function acknowledge(sent: Snapshot, answer: Scenario) {
    failures = 0
    acknowledged = sent
    bench.markSaved({ id: answer.id, version: answer.version, document: sent.document })
    if (changedSince(sent)) onChange()
    else settle()
  }

  function fail(failure: ApiFailure) {
    if (failure.status === 409 && failure.current) {
      state.value = { kind: 'conflict', theirs: failure.current as Scenario }
      return
    }
    state.value = { kind: 'failed', failure }
    if (failure.temporary) schedule(retryMs[Math.min(failures++, retryMs.length - 1)]!)
  }

  /** Changes that never reached the server come back to the bench. When others were saved since, the person chooses. */
  function takeUp(draft: LocalDraft, document: ScenarioDocument, present: Scenario) {
    if (draft.version !== present.version) state.value = { kind: 'conflict', theirs: present }
    put({ title: draft.title, machine: draft.machine, axis: draft.axis, document })
  }

  function put({ document, title, machine, axis }: Pick<Scenario, 'document' | 'title' | 'machine' | 'axis'>) {
    bench.change(draft => Object.assign(draft, document, { designPoint: toComplex(document.designPoint) }))
    bench.title = title
    bench.machine = machine
    bench.axis = axis
  }

  /** The person keeps their own version: it is written over the other one, knowingly. */
  async function keepMine() {
    if (state.value.kind !== 'conflict') return
    bench.version = state.value.theirs.version
    state.value = { kind: 'pending' }
    await save()
  }

  /** The person takes the other version. Theirs becomes the bench; their own document stays reachable by undo. */
  function takeTheirs() {
    if (state.value.kind !== 'conflict') return
    accept(state.value.theirs)
  }

  /** A version from the server goes on the bench as it is; what stood there stays reachable by undo. */
  function accept(newer: Scenario) {
    put(newer)
    acknowledged = snapshot()
    bench.markSaved({ id: newer.id, version: newer.version })
    settle()
  }

  function settled(): boolean {
    return stopped || !changedSince(acknowledged)
  }

  /** From here on the scenario is somebody else's business. */
  function stop() {
    stopped = true
    clearTimeout(timer)
  }

  function onUnload(event: BeforeUnloadEvent) {
    if (settled()) return
    keepLocally()
    event.preventDefault()
  }

  const onOnline = () => { if (state.value.kind === 'failed') void save() }

  watch(() => [bench.document, bench.title, bench.machine, bench.axis, bench.gestureStart], onChange)
  onMounted(() => {
    addEventListener('beforeunload', onUnload)
    addEventListener('online', onOnline)
  })
  onScopeDispose(() => {
    clearTimeout(timer)
    if (import.meta.server) return
    removeEventListener('beforeunload', onUnload)
    removeEventListener('online', onOnline)
  })

  return { state, save, takeUp, keepMine, takeTheirs, accept, settled, stop }
}
