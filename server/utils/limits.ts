import type { H3Event } from 'h3'
import { RateLimiterMemory, RateLimiterRes } from 'rate-limiter-flexible'
import { failure } from './errors'

/** Points per duration in seconds. Compute admits well over 120 a second, so that a hand never meets the limit. */
const limiters = {
  compute: new RateLimiterMemory({ points: 1200, duration: 5 }),
  signInFromAddress: new RateLimiterMemory({ points: 60, duration: 15 * 60 }),
  signInToAccount: new RateLimiterMemory({ points: 10, duration: 15 * 60 }),
  register: new RateLimiterMemory({ points: 20, duration: 60 * 60 }),
  guestComment: new RateLimiterMemory({ points: 20, duration: 10 * 60 }),
  write: new RateLimiterMemory({ points: 600, duration: 60 }),
}

/** The caller's address. X-Forwarded-For counts only when a proxy of one's own is configured, or anyone could escape a limit by forging it. */
export function callerAddress(event: H3Event): string {
  const trusted = useRuntimeConfig(event).trustProxy
  return getRequestIP(event, { xForwardedFor: trusted === true || String(trusted) === 'true' }) ?? 'unknown'
}

async function consume(name: keyof typeof limiters, key: string) {
  try {
    await limiters[name].consume(key)
  } catch (refusal) {
    if (!(refusal instanceof RateLimiterRes)) throw refusal
    return Math.max(1, Math.ceil(refusal.msBeforeNext / 1000))
  }
}

/** Guard: one more request of this kind, or 429 with Retry-After. */
export async function limit(event: H3Event, name: keyof typeof limiters, key = callerAddress(event)) {
  if (useRuntimeConfig(event).rateLimits === 'off') return
  const wait = await consume(name, key)
  if (wait === undefined) return
  setResponseHeader(event, 'Retry-After', wait)
  throw failure(429, `That was too often; try again in ${wait} s.`)
}

export const limitCompute = (event: H3Event) => limit(event, 'compute')

/** By account together with address: a stranger's wrong guesses do not lock the owner out elsewhere. */
export async function limitSignIn(event: H3Event, email: string) {
  await limit(event, 'signInFromAddress')
  await limit(event, 'signInToAccount', `${email} ${callerAddress(event)}`)
}
