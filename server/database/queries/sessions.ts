import { and, eq, gt, isNull, lt, or } from 'drizzle-orm'
import { hashOf, sessionSecret } from '../../utils/ids'
import { database } from '../client'
import { sessions, users } from '../schema'
import type { User } from './users'

const minute = 60_000
const day = 24 * 60 * minute
/** Signed out after a week without a request, and after thirty days whatever happens. */
const idleLimit = 7 * day
const absoluteLimit = 30 * day

/** Opens a session; the answer is the secret for the cookie, kept nowhere else. */
export function openSession(userId: string, now = new Date()): string {
  const secret = sessionSecret()
  database().insert(sessions).values({
    idHash: hashOf(secret), userId, createdAt: now, lastSeenAt: now, expiresAt: new Date(now.getTime() + absoluteLimit),
  }).run()
  return secret
}

/** The person behind a cookie's secret, while the session lives and the account is not disabled. */
export function userOfSession(secret: string, now = new Date()): User | undefined {
  const idHash = hashOf(secret)
  const row = database().select({ user: users, lastSeenAt: sessions.lastSeenAt }).from(sessions)
    .innerJoin(users, eq(users.id, sessions.userId))
    .where(and(
      eq(sessions.idHash, idHash), gt(sessions.expiresAt, now),
      gt(sessions.lastSeenAt, new Date(now.getTime() - idleLimit)), isNull(users.disabledAt),
    )).get()
  if (row === undefined) return undefined
  if (now.getTime() - row.lastSeenAt.getTime() > minute) {
    database().update(sessions).set({ lastSeenAt: now }).where(eq(sessions.idHash, idHash)).run()
  }
  return row.user
}

export function endSession(secret: string) {
  database().delete(sessions).where(eq(sessions.idHash, hashOf(secret))).run()
}

export function deleteExpiredSessions(now = new Date()): number {
  return database().delete(sessions)
    .where(or(lt(sessions.expiresAt, now), lt(sessions.lastSeenAt, new Date(now.getTime() - idleLimit)))).run().changes
}
