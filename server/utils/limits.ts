import type { H3Event } from 'h3'
import { RateLimiterMemory, RateLimiterRes } from 'rate-limiter-flexible'
import { failure } from './errors'

/**
 * Points per duration in seconds. Compute admits well over 120 requests a second, so that a hand never meets the limit; its time, in milliseconds,
 * keeps those who ask for the dearest designs from taking more than a third of a core.
 */
const limiters = {
  compute: new RateLimiterMemory({ points: 1200, duration: 5 }),
  computingTime: new RateLimiterMemory({ points: 20_000, duration: 60 }),
  signInFromAddress: new RateLimiterMemory({ points: 60, duration: 15 * 60 }),
  signInToAccount: new RateLimiterMemory({ points: 10, duration: 15 * 60 }),
  register: new RateLimiterMemory({ points: 20, duration: 60 * 60 }),
  guestComment: new RateLimiterMemory({ points: 20, duration: 10 * 60 }),
  write: new RateLimiterMemory({ points: 600, duration: 60 }),
}

/**
 * What may be open at the same time from one address. A page holds one event stream. Of searches a second one may begin while the first, given up a
 * moment ago, has not yet heard of it.
 */
const openAtOnce = {
  streams: { most: 200, waitSeconds: 30, open: new Map<string, number>() },
  searches: { most: 2, waitSeconds: 5, open: new Map<string, number>() },
}

// Without the event: settings do not change between requests, and asking per event reads the whole environment anew each time.
const isOff = () => useRuntimeConfig().rateLimits === 'off'

/**
 * The caller's address. X-Forwarded-For counts only when a proxy of one's own is configured, and then only its last entry, which that
 * proxy wrote: the entries before it come from the caller, who could escape a limit by inventing them.
 */
export function callerAddress(event: H3Event): string {
  const direct = event.node.req.socket?.remoteAddress ?? 'unknown'
  if (String(useRuntimeConfig().trustProxy) !== 'true') return direct
  return getRequestHeader(event, 'x-forwarded-for')?.split(',').at(-1)?.trim() || direct
}

async function consume(name: keyof typeof limiters, key: string) {
  try {
    await limiters[name].consume(key)
  } catch (refusal) {
    if (!(refusal instanceof RateLimiterRes)) throw refusal
    return Math.max(1, Math.ceil(refusal.msBeforeNext / 1000))
  }
}

function refuse(event: H3Event, waitSeconds: number) {
  setResponseHeader(event, 'Retry-After', waitSeconds)
  return failure(429, `That was too often; try again in ${waitSeconds} s.`)
}

/** Guard: one more request of this kind, or 429 with Retry-After. */
export async function limit(event: H3Event, name: keyof typeof limiters, key = callerAddress(event)) {
  if (isOff()) return
  const wait = await consume(name, key)
  if (wait === undefined) return
  console.warn('[limit]', name, callerAddress(event))
  throw refuse(event, wait)
}

/** Guard for computing: how often, and for how much time of the server. */
export async function limitCompute(event: H3Event) {
  await limit(event, 'compute')
  await limitComputingTime(event)
}

/** Guard: 429 once the caller's computing time is used up; for work in stretches, before each of them. */
export async function limitComputingTime(event: H3Event) {
  if (isOff()) return
  const spent = await limiters.computingTime.get(callerAddress(event))
  if (spent === null || spent.remainingPoints > 0) return
  console.warn('[limit] computingTime', callerAddress(event))
  throw refuse(event, Math.max(1, Math.ceil(spent.msBeforeNext / 1000)))
}

/** Does the work and puts its time to the caller's account. */
export async function compute<Answer>(event: H3Event, work: () => Answer): Promise<Answer> {
  const started = performance.now()
  try {
    return work()
  } finally {
    if (!isOff()) await limiters.computingTime.penalty(callerAddress(event), Math.ceil(performance.now() - started))
  }
}

const accountFromAddress = (event: H3Event, email: string) => `${email} ${callerAddress(event)}`

/** By account together with address: a stranger's wrong guesses do not lock the owner out elsewhere. */
export async function limitSignIn(event: H3Event, email: string) {
  await limit(event, 'signInFromAddress')
  await limit(event, 'signInToAccount', accountFromAddress(event, email))
}

/** The right password wipes out the wrong guesses before it. */
export async function forgiveSignIn(event: H3Event, email: string) {
  await limiters.signInToAccount.delete(accountFromAddress(event, email))
}

function limitOpen(event: H3Event, name: keyof typeof openAtOnce): () => void {
  const { most, waitSeconds, open } = openAtOnce[name]
  const address = callerAddress(event)
  const count = open.get(address) ?? 0
  if (count >= most && !isOff()) throw refuse(event, waitSeconds)
  open.set(address, count + 1)
  return () => {
    const left = (open.get(address) ?? 1) - 1
    if (left > 0) open.set(address, left)
    else open.delete(address)
  }
}

/** Guard: one more open stream from this address. The answer takes it off the count again. */
export const limitStreams = (event: H3Event) => limitOpen(event, 'streams')

/** Guard: one more search from this address. The answer takes it off the count again. */
export const limitSearches = (event: H3Event) => limitOpen(event, 'searches')
