import type { H3Event } from 'h3'
import { teamsOf } from '../database/queries/memberships'
import { endSession, openSession, userOfSession } from '../database/queries/sessions'
import type { User } from '../database/queries/users'
import { failure } from './errors'

declare module '#auth-utils' {
  interface SecureSessionData {
    /** A random session id; everything else is in the sessions table. */
    sid: string
  }
}

/** The signed-in person, looked up afresh at each request; undefined for a guest. */
export async function currentUser(event: H3Event): Promise<User | undefined> {
  const sid = await sessionId(event)
  return sid === undefined ? undefined : userOfSession(sid)
}

/** The random id in the sealed cookie. Without a cookie nothing is asked, because asking would hand every guest one. */
async function sessionId(event: H3Event): Promise<string | undefined> {
  const { name } = useRuntimeConfig(event).session
  if (name === undefined || getCookie(event, name) === undefined) return undefined
  return (await getUserSession(event)).secure?.sid
}

/** Guard: the signed-in person and the teams they belong to, or 401. */
export async function requireUser(event: H3Event): Promise<{ user: User, teamIds: string[], homeTeamId: string }> {
  const user = await currentUser(event)
  if (user === undefined) throw failure(401, 'Sign in first; what is on the bench is kept.')
  const teamIds = teamsOf(user.id).map(team => team.teamId)
  const homeTeamId = teamIds[0]
  if (homeTeamId === undefined) throw failure(403, 'You belong to no team.')
  return { user, teamIds, homeTeamId }
}

/** Signs in under a fresh session id; an earlier session of this browser ends. */
export async function signIn(event: H3Event, user: User) {
  await signOut(event)
  await replaceUserSession(event, { secure: { sid: openSession(user.id) } })
}

/** Ends the session on the server, so that a replayed cookie is worth nothing, and clears the cookie. */
export async function signOut(event: H3Event) {
  const sid = await sessionId(event)
  if (sid === undefined) return
  endSession(sid)
  await clearUserSession(event)
}

/** What others and the page may know of the signed-in person. */
export const publicUser = (user: User) => ({ name: user.name, email: user.email })
