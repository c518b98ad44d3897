import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { newestWaits, RefusedError, type AskingState } from '~/utils/newest-waits'

interface Call { question: string, answer: (value: string) => void, fail: (error: Error) => void, signal: AbortSignal }

function bench(options: { slowAfter?: number, giveUpAfter?: number } = {}) {
  const calls: Call[] = []
  const answers: [string, number][] = []
  const refusals: string[] = []
  const states: AskingState[] = []
  const channel = newestWaits<string, string>({
    ask: (question, signal) => new Promise((answer, fail) => calls.push({ question, answer, fail, signal })),
    onAnswer: (answer, _question, sequence) => answers.push([answer, sequence]),
    onRefusal: refusal => refusals.push(refusal.message),
    onState: state => states.push(state),
    pauses: [400, 1000],
    ...options,
  })
  return { channel, calls, answers, refusals, states }
}
const settle = () => vi.advanceTimersByTimeAsync(0)

describe('one question under way, the newest waits', () => {
  beforeEach(() => { vi.useFakeTimers() })
  afterEach(() => { vi.useRealTimers() })

  it('drops every question between the one under way and the newest', async () => {
    const { channel, calls, answers } = bench()
    for (const question of ['a', 'b', 'c', 'd']) channel.submit(question)
    expect(calls.map(call => call.question)).toEqual(['a'])
    calls[0]!.answer('A')
    await settle()
    expect(calls.map(call => call.question)).toEqual(['a', 'd'])
    calls[1]!.answer('D')
    await settle()
    expect(answers).toEqual([['A', 1], ['D', 2]])
  })

  it('aborts an outdated question and never reports its answer', async () => {
    const { channel, calls, answers } = bench()
    channel.submit('old loop')
    channel.submit('new loop', true)
    expect(calls[0]!.signal.aborted).toBe(true)
    calls[1]!.answer('new')
    await settle()
    calls[0]!.answer('old')
    await settle()
    expect(answers).toEqual([['new', 2]])
  })

  it('says so when the answer is late, and stays so while a newer question is open', async () => {
    const { channel, calls, states } = bench({ slowAfter: 300 })
    channel.submit('a')
    await vi.advanceTimersByTimeAsync(300)
    channel.submit('b')
    calls[0]!.answer('A')
    await settle()
    expect(states).toEqual(['asking', 'waiting'])
    calls[1]!.answer('B')
    await settle()
    expect(states).toEqual(['asking', 'waiting', 'idle'])
  })

  it('asks again by itself after a failure, with the newest question', async () => {
    const { channel, calls, answers, states } = bench()
    channel.submit('a')
    calls[0]!.fail(new TypeError('no connection'))
    await settle()
    expect(states.at(-1)).toBe('waiting')
    channel.submit('b')
    expect(calls).toHaveLength(1)
    await vi.advanceTimersByTimeAsync(400)
    expect(calls.map(call => call.question)).toEqual(['a', 'b'])
    calls[1]!.answer('B')
    await settle()
    expect(answers).toEqual([['B', 2]])
    expect(states.at(-1)).toBe('idle')
  })

  it('gives up an attempt that hangs and makes it again', async () => {
    const { channel, calls, answers } = bench({ giveUpAfter: 5000 })
    channel.submit('a')
    await vi.advanceTimersByTimeAsync(5400)
    expect(calls[0]!.signal.aborted).toBe(true)
    expect(calls).toHaveLength(2)
    calls[1]!.answer('A')
    await settle()
    expect(answers).toEqual([['A', 2]])
  })

  it('does not repeat a refused question, and passes over a refusal that a newer question has overtaken', async () => {
    const { channel, calls, refusals } = bench()
    channel.submit('a')
    channel.submit('b')
    calls[0]!.fail(new RefusedError(null, 'no to a'))
    await settle()
    calls[1]!.fail(new RefusedError(null, 'no to b'))
    await vi.advanceTimersByTimeAsync(10_000)
    expect(refusals).toEqual(['no to b'])
    expect(calls).toHaveLength(2)
  })

  it('is silent once stopped', async () => {
    const { channel, calls, answers, states } = bench()
    channel.submit('a')
    channel.stop()
    calls[0]!.answer('A')
    await vi.advanceTimersByTimeAsync(10_000)
    expect(answers).toEqual([])
    expect(states.at(-1)).toBe('idle')
    expect(calls).toHaveLength(1)
  })
})
