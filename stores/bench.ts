import type { Complex } from '#shared/numerics/complex'
import type { ScenarioDocument } from '#shared/schemas/document'
import type { Parameter, Plant } from '#shared/schemas/loop'
import { toComplex, type BenchDocument } from '~/utils/bench/bench-document'

/** `demo`: not saved anywhere; `own`: a scenario that may be saved; `shared`: a visitor's what-if, which changes nothing. */
export type BenchMode = 'demo' | 'own' | 'shared'

export interface BenchContent {
  document: ScenarioDocument
  title: string
  machine?: string
  axis?: string
  mode: BenchMode
  scenarioId?: string | null
  version?: number | null
}

const undoDepth = 200

/**
 * The scenario on the bench, with undo and redo.
 *
 * A document is never changed in place: each step puts a new one in its place, so that undo is a matter of keeping the old ones.
 * Where each field may travel:
 * | saved with the scenario | document, title, machine, axis |
 * | told to the server when saving, never part of the document | scenarioId, version |
 * | this page alone | mode, loads, baseline, undo and redo steps, gesture, plantDrafts, parameterMemory |
 */
export const useBenchStore = defineStore('bench', () => {
  const document = shallowRef<BenchDocument>(emptyDocument())
  const title = ref('')
  const machine = ref('')
  const axis = ref('')
  const scenarioId = ref<string | null>(null)
  const version = ref<number | null>(null)
  const mode = ref<BenchMode>('demo')
  /** Counts what was put on the bench: text that was being typed into an earlier document belongs to that one. */
  const loads = ref(0)
  /** What was loaded or saved last; null: nothing that anybody could return to. */
  const baseline = shallowRef<{ document: BenchDocument, title: string, machine: string, axis: string } | null>(null)
  const past = shallowRef<readonly BenchDocument[]>([])
  const future = shallowRef<readonly BenchDocument[]>([])
  const gestureStart = shallowRef<BenchDocument | null>(null)
  /** The plant as last typed in each of its forms, so that trying another form loses nothing. */
  const plantDrafts = shallowRef<Partial<Record<Plant['form'], Plant>>>({})
  /** Figures of parameters that left the formula, for when their name comes back. */
  const parameterMemory = shallowRef<Readonly<Record<string, Parameter>>>({})

  const canUndo = computed(() => past.value.length > 0 || gestureStart.value !== null)
  const canRedo = computed(() => future.value.length > 0 && gestureStart.value === null)
  const dirty = computed(() => {
    const kept = baseline.value
    return kept !== null && !(toRaw(kept.document) === toRaw(document.value)
      && kept.title === title.value && kept.machine === machine.value && kept.axis === axis.value)
  })

  /** Puts a scenario on the bench; the steps of the one before are gone. */
  function load(content: BenchContent) {
    loads.value += 1
    document.value = { ...copy(content.document), designPoint: toComplex(content.document.designPoint) }
    title.value = content.title
    machine.value = content.machine ?? ''
    axis.value = content.axis ?? ''
    mode.value = content.mode
    scenarioId.value = content.scenarioId ?? null
    version.value = content.version ?? null
    past.value = []
    future.value = []
    gestureStart.value = null
    plantDrafts.value = {}
    parameterMemory.value = {}
    keepAsBaseline(document.value)
  }

  /** What was sent has been saved. `document` is the one that was sent: the hand may have moved on since. */
  function markSaved(saved: { id: string, version: number, document?: BenchDocument }) {
    scenarioId.value = saved.id
    version.value = saved.version
    mode.value = 'own'
    keepAsBaseline(saved.document ?? document.value)
  }

  function keepAsBaseline(kept: BenchDocument) {
    baseline.value = { document: kept, title: title.value, machine: machine.value, axis: axis.value }
  }

  /** One undo step. The mutator gets a copy of its own to change. */
  function change(mutator: (draft: BenchDocument) => void) {
    endGesture()
    const draft = copy(document.value)
    mutator(draft)
    step(document.value, draft)
  }

  function step(from: BenchDocument, to: BenchDocument) {
    past.value = [...past.value, from].slice(-undoDepth)
    future.value = []
    document.value = to
  }

  function beginGesture() {
    endGesture()
    gestureStart.value = document.value
  }

  /** During a gesture: no step of its own. Otherwise one step. */
  function moveDesignPoint(point: Complex) {
    const moved = { ...document.value, designPoint: { re: point.re, im: Math.abs(point.im) } }
    if (gestureStart.value === null) step(document.value, moved)
    else document.value = moved
  }

  /** The whole gesture becomes one step; one that ended where it began leaves none. */
  function endGesture() {
    const start = gestureStart.value
    if (start === null) return
    gestureStart.value = null
    const { re, im } = document.value.designPoint
    if (re === start.designPoint.re && im === start.designPoint.im) document.value = start
    else step(start, document.value)
  }

  function cancelGesture() {
    if (gestureStart.value === null) return
    document.value = gestureStart.value
    gestureStart.value = null
  }

  function undo() {
    if (gestureStart.value !== null) return cancelGesture()
    const last = past.value.at(-1)
    if (!last) return
    past.value = past.value.slice(0, -1)
    future.value = [document.value, ...future.value]
    document.value = last
  }

  function redo() {
    const next = future.value[0]
    if (!next || gestureStart.value !== null) return
    future.value = future.value.slice(1)
    past.value = [...past.value, document.value]
    document.value = next
  }

  return {
    document, title, machine, axis, scenarioId, version, mode, loads, baseline, past, future, gestureStart, plantDrafts, parameterMemory,
    canUndo, canRedo, dirty,
    load, markSaved, change, beginGesture, moveDesignPoint, endGesture, cancelGesture, undo, redo,
  }
})

function emptyDocument(): BenchDocument {
  return {
    loop: { plant: { form: 'coefficients', numerator: [1], denominator: [1, 1, 0] } },
    controller: { form: 'gain' },
    designPoint: { re: -0.5, im: 0.5 },
    requirements: [],
    notes: '',
  }
}

/** Documents are plain JSON; unlike structuredClone this also reads through reactive proxies. */
function copy<T>(value: T): T {
  return JSON.parse(JSON.stringify(value)) as T
}
