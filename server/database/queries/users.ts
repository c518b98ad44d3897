import { eq } from 'drizzle-orm'
import { shortId } from '../../utils/ids'
import { atomically, database } from '../client'
import { memberships, teams, users } from '../schema'

export type User = typeof users.$inferSelect

export function userByEmail(email: string): User | undefined {
  return database().select().from(users).where(eq(users.email, email)).get()
}

/** A new person with a team of their own; undefined when the address is taken. */
export function registerUser(person: { name: string, email: string, passwordHash: string }): User | undefined {
  return atomically((store) => {
    if (userByEmail(person.email) !== undefined) return undefined
    const now = new Date()
    const user = store.insert(users).values({ id: shortId(), ...person, createdAt: now }).returning().get()
    const team = store.insert(teams).values({ id: shortId(), name: `${person.name}'s team`, createdAt: now }).returning().get()
    store.insert(memberships).values([
      { teamId: team.id, userId: user.id, role: 'owner', createdAt: now },
      { teamId: team.id, userId: user.id, role: 'engineer', createdAt: now },
    ]).run()
    return user
  })
}
