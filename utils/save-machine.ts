import type { Scenario } from '#shared/schemas/scenario'
import type { BenchDocument } from './bench/bench-document'
import { readFailure, type ApiFailure } from './api-failure'

export type SaveState =
  | { kind: 'saved' }
  | { kind: 'pending' }
  | { kind: 'saving' }
  | { kind: 'failed', failure: ApiFailure }
  | { kind: 'conflict', theirs: Scenario }

/** What is saved of a scenario. Documents are never changed in place: the same content is the same object. */
export interface Snapshot {
  document: BenchDocument
  title: string
  machine: string
  axis: string
}

export interface SaveMachineOptions {
  /** What the server has, and as which version. */
  saved: Snapshot
  version: number
  /** Sends what was made of the version given; rejects with what `readFailure` reads. */
  send(version: number, snapshot: Snapshot): Promise<Scenario>
  /** Keeps in the browser what was made of the version given, until the server has it. */
  keep(version: number, snapshot: Snapshot): void
  drop(): void
  show(state: SaveState): void
  onSaved(answer: Scenario, sent: Snapshot): void
}

const quietMs = 700
const retryMs = [2_000, 4_000, 8_000, 15_000, 30_000]

/**
 * Saves one scenario whenever the hand rests: one request at a time, a failed one again and again, ever more slowly. Each save carries the version
 * that the work began from; when somebody else was faster nothing is written until the person has chosen. It knows only what it is told by
 * `changed`: whatever else comes to stand on the bench never reaches this scenario.
 */
export function saveMachine(options: SaveMachineOptions) {
  let acknowledged = options.saved
  let present = options.saved
  let base = options.version
  let state: SaveState = { kind: 'saved' }
  let resting = true
  let running: Promise<void> | null = null
  let timer: ReturnType<typeof setTimeout> | undefined
  let failures = 0
  let stopped = false

  function become(next: SaveState) {
    state = next
    if (!stopped) options.show(next)
  }

  const unchanged = () => same(present, acknowledged)

  /** What the scenario is now; `atRest` is false while a gesture goes on. */
  function changed(now: Snapshot, atRest = true) {
    if (stopped) return
    present = now
    resting = atRest
    look()
  }

  function look() {
    if (unchanged()) {
      if (state.kind === 'pending' || state.kind === 'failed') settle()
      return
    }
    options.keep(base, present)
    if (state.kind === 'conflict') return
    become({ kind: 'pending' })
    if (resting) schedule(quietMs)
  }

  function settle() {
    clearTimeout(timer)
    options.drop()
    become({ kind: 'saved' })
  }

  function schedule(afterMs: number) {
    clearTimeout(timer)
    timer = setTimeout(() => void save(), afterMs)
  }

  function save(): Promise<void> {
    running ??= send().finally(() => { running = null })
    return running
  }

  /** Saves what is there now, also what changed while an earlier save was under way. */
  async function flush() {
    await save()
    if (state.kind === 'pending') await save()
  }

  async function send() {
    clearTimeout(timer)
    if (stopped || state.kind === 'conflict' || unchanged()) return
    const sent = present
    become({ kind: 'saving' })
    try {
      acknowledge(sent, await options.send(base, sent))
    } catch (thrown) {
      fail(readFailure(thrown))
    }
  }

  function acknowledge(sent: Snapshot, answer: Scenario) {
    failures = 0
    acknowledged = sent
    base = answer.version
    if (!stopped) options.onSaved(answer, sent)
    if (unchanged()) settle()
    else if (stopped) options.keep(base, present)
    else look()
  }

  function fail(failure: ApiFailure) {
    if (stopped) return
    if (failure.status === 409 && failure.current) return become({ kind: 'conflict', theirs: failure.current as Scenario })
    become({ kind: 'failed', failure })
    if (failure.temporary) schedule(retryMs[Math.min(failures++, retryMs.length - 1)]!)
  }

  /** Work that never reached the server is about to be reported by `changed`. When others saved since it began, the person chooses. */
  function resume(version: number, theirs: Scenario) {
    base = version
    if (version !== theirs.version) become({ kind: 'conflict', theirs })
  }

  /** The person keeps their own: it is written over the other one, knowingly. */
  async function keepMine() {
    if (state.kind !== 'conflict') return
    base = state.theirs.version
    become({ kind: 'pending' })
    await flush()
  }

  /** A version from the server has taken the place of what was there. */
  function accept(version: number, now: Snapshot) {
    acknowledged = present = now
    base = version
    settle()
  }

  /** Nothing is sent from here on; what is under way is still taken note of. */
  function stop() {
    stopped = true
    clearTimeout(timer)
  }

  /** Whether nothing is left to do: the server has everything, or it was stopped. */
  const settled = () => stopped || unchanged()

  return { changed, save, flush, resume, keepMine, accept, settled, stop }
}

function same(a: Snapshot, b: Snapshot): boolean {
  return a.document === b.document && a.title === b.title && a.machine === b.machine && a.axis === b.axis
}
