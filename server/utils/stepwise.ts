import type { H3Event } from 'h3'
import { compute, limitComputingTime } from './limits'

/** Milliseconds of one stretch of computing; between two of them other requests are served. */
const stretchMs = 10

/** Work in steps. It reports at each, and ends at its next one when it is answered with `true`. */
type Steps<Progress, Result> = Generator<Progress, Result, boolean | undefined>

/**
 * Drives stepwise work in short stretches, each on the caller's account, and reports the newest progress after each. Whoever stops asking stops the work.
 * @param mostMs computing time after which the work is told to end
 */
export async function* inStretches<Progress, Result>(event: H3Event, steps: Steps<Progress, Result>, mostMs: number): AsyncGenerator<Progress, Result> {
  let spent = 0
  for (;;) {
    await limitComputingTime(event)
    const started = performance.now()
    const step = await compute(event, () => {
      for (;;) {
        const next = steps.next(spent > mostMs)
        if (next.done || performance.now() - started > stretchMs) return next
      }
    })
    spent += performance.now() - started
    if (step.done) return step.value
    yield step.value
    await new Promise(resolve => setImmediate(resolve))
  }
}

/** What work in stretches comes to; it stops where nobody waits for it any more. */
export async function resultOf<Result>(event: H3Event, stretches: AsyncGenerator<unknown, Result>): Promise<Result | undefined> {
  for (;;) {
    const step = await stretches.next()
    if (step.done) return step.value
    if (event.node.res.destroyed) {
      await stretches.return(undefined as never)
      return undefined
    }
  }
}
