import { eq } from 'drizzle-orm'
import { database } from '../client'
import { memberships, type Role } from '../schema'

/** The teams of a person, the oldest first, each with the roles held there. */
export function teamsOf(userId: string): { teamId: string, roles: Role[] }[] {
  const rows = database().select().from(memberships).where(eq(memberships.userId, userId)).orderBy(memberships.createdAt).all()
  const roles = new Map<string, Role[]>()
  for (const row of rows) roles.set(row.teamId, [...roles.get(row.teamId) ?? [], row.role])
  return [...roles].map(([teamId, held]) => ({ teamId, roles: held }))
}
