import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import type { Scenario } from '#shared/schemas/scenario'
import type { BenchDocument } from '~/utils/bench/bench-document'
import { saveMachine, type SaveState, type Snapshot } from '~/utils/save-machine'
import { slewDocument } from '../../fixtures/document'

const snapshot = (title: string): Snapshot => ({ document: slewDocument as BenchDocument, title, machine: '', axis: '' })
const answer = (version: number, title = '') => ({ id: 'a', version, title }) as Scenario
const temporary = { statusCode: 503, data: { message: 'busy' } }

/** A machine on version 3 of a scenario called "first", whose requests are answered by the test. */
function begin() {
  const requests: { version: number, title: string, answer: (scenario: Scenario) => void, refuse: (error: unknown) => void }[] = []
  const states: SaveState['kind'][] = []
  const saved: string[] = []
  let kept: { version: number, title: string } | null = null
  const first = snapshot('first')
  const machine = saveMachine({
    saved: first,
    version: 3,
    send: (version, { title }) => new Promise((resolve, reject) => requests.push({ version, title, answer: resolve, refuse: reject })),
    keep: (version, { title }) => { kept = { version, title } },
    drop: () => { kept = null },
    show: ({ kind }) => states.push(kind),
    onSaved: (_, { title }) => saved.push(title),
  })
  return { machine, requests, states, saved, first, kept: () => kept }
}

describe('saving', () => {
  beforeEach(() => void vi.useFakeTimers())
  afterEach(() => void vi.useRealTimers())

  it('waits until the hand rests, then sends the newest once, with the version it began from', async () => {
    const { machine, requests, states, saved, kept } = begin()
    machine.changed(snapshot('second'))
    await vi.advanceTimersByTimeAsync(600)
    machine.changed(snapshot('third'))
    await vi.advanceTimersByTimeAsync(600)
    expect(requests).toEqual([])
    expect(kept()).toEqual({ version: 3, title: 'third' })
    await vi.advanceTimersByTimeAsync(100)
    expect(requests).toMatchObject([{ version: 3, title: 'third' }])
    requests[0]!.answer(answer(4))
    await vi.runAllTimersAsync()
    expect(states).toEqual(['pending', 'pending', 'saving', 'saved'])
    expect(saved).toEqual(['third'])
    expect(kept()).toBeNull()
  })

  it('does not save in the middle of a gesture', async () => {
    const { machine, requests } = begin()
    machine.changed(snapshot('dragged'), false)
    await vi.advanceTimersByTimeAsync(5000)
    expect(requests).toEqual([])
    machine.changed(snapshot('dropped'))
    await vi.advanceTimersByTimeAsync(700)
    expect(requests).toMatchObject([{ title: 'dropped' }])
  })

  it('has one request under way; flushing sends after it what came meanwhile, on the new version', async () => {
    const { machine, requests } = begin()
    machine.changed(snapshot('second'))
    const flushed = machine.flush()
    machine.changed(snapshot('third'))
    await vi.advanceTimersByTimeAsync(5000)
    expect(requests).toHaveLength(1)
    requests[0]!.answer(answer(4))
    await vi.advanceTimersByTimeAsync(0)
    expect(requests).toMatchObject([{ version: 3, title: 'second' }, { version: 4, title: 'third' }])
    requests[1]!.answer(answer(5))
    await flushed
    expect(machine.settled()).toBe(true)
  })

  it('tries a failed save again, ever more slowly, and never a refused one', async () => {
    const { machine, requests, states } = begin()
    machine.changed(snapshot('second'))
    await vi.advanceTimersByTimeAsync(700)
    for (const [attempt, pause] of [2000, 4000, 8000].entries()) {
      requests[attempt]!.refuse(temporary)
      await vi.advanceTimersByTimeAsync(pause - 1)
      expect(requests).toHaveLength(attempt + 1)
      await vi.advanceTimersByTimeAsync(1)
      expect(requests).toHaveLength(attempt + 2)
    }
    requests[3]!.refuse({ statusCode: 404, data: { message: 'gone' } })
    await vi.advanceTimersByTimeAsync(120_000)
    expect(requests).toHaveLength(4)
    expect(states.at(-1)).toBe('failed')
  })

  it('writes nothing over a newer version until the person has chosen', async () => {
    const { machine, requests, states, kept } = begin()
    machine.changed(snapshot('mine'))
    await vi.advanceTimersByTimeAsync(700)
    requests[0]!.refuse({ statusCode: 409, data: { message: 'newer', data: { issues: [], current: answer(5, 'theirs') } } })
    await vi.advanceTimersByTimeAsync(0)
    machine.changed(snapshot('mine, further'))
    await machine.flush()
    await vi.advanceTimersByTimeAsync(60_000)
    expect(states.at(-1)).toBe('conflict')
    expect(requests).toHaveLength(1)
    expect(kept()).toEqual({ version: 3, title: 'mine, further' })

    void machine.keepMine()
    expect(requests.at(-1)).toMatchObject({ version: 5, title: 'mine, further' })
  })

  it('keeps the version that resumed work began from, so that a second reload still asks', () => {
    const { machine, kept, states } = begin()
    machine.resume(1, answer(3, 'theirs'))
    machine.changed(snapshot('from an earlier visit'))
    expect(states).toEqual(['conflict'])
    expect(kept()).toEqual({ version: 1, title: 'from an earlier visit' })
  })

  it('takes the other version without sending anything', async () => {
    const { machine, requests, states, kept } = begin()
    machine.resume(1, answer(3, 'theirs'))
    machine.changed(snapshot('mine'))
    machine.accept(3, snapshot('theirs'))
    await vi.advanceTimersByTimeAsync(5000)
    expect(requests).toEqual([])
    expect(kept()).toBeNull()
    expect(states.at(-1)).toBe('saved')
  })

  it('takes back what was undone before it was sent', async () => {
    const { machine, requests, first, kept } = begin()
    machine.changed(snapshot('second'))
    machine.changed(first)
    await vi.advanceTimersByTimeAsync(5000)
    expect(requests).toEqual([])
    expect(kept()).toBeNull()
  })

  it('sends nothing once stopped; an answer that comes late only frees what was kept', async () => {
    const { machine, requests, saved, states, kept } = begin()
    machine.changed(snapshot('second'))
    await vi.advanceTimersByTimeAsync(700)
    machine.stop()
    machine.changed(snapshot('of another scenario'))
    requests[0]!.answer(answer(4))
    await vi.advanceTimersByTimeAsync(60_000)
    expect(requests).toHaveLength(1)
    expect(saved).toEqual([])
    expect(states.at(-1)).toBe('saving')
    expect(kept()).toBeNull()
  })

  it('keeps what came after a late answer for the next visit, on the version of that answer', async () => {
    const { machine, requests, kept } = begin()
    machine.changed(snapshot('second'))
    await vi.advanceTimersByTimeAsync(700)
    machine.changed(snapshot('third'))
    machine.stop()
    requests[0]!.answer(answer(4))
    await vi.advanceTimersByTimeAsync(60_000)
    expect(requests).toHaveLength(1)
    expect(kept()).toEqual({ version: 4, title: 'third' })
  })
})
