import { and, asc, eq, isNull, sql } from 'drizzle-orm'
import type { Comment, CreateCommentBody } from '#shared/schemas/comment'
import { shortId } from '../../utils/ids'
import { atomically, database } from '../client'
import { comments, scenarios, users } from '../schema'

export type Author = { userId: string } | { guestName: string, linkId: string }

const columns = {
  id: comments.id,
  parentId: comments.parentId,
  authorName: sql<string>`coalesce(${users.name}, ${comments.guestName})`,
  authorId: comments.authorId,
  body: comments.body,
  anchor: comments.anchor,
  designPoint: comments.designPoint,
  resolvedAt: comments.resolvedAt,
  createdAt: comments.createdAt,
}

type Row = Omit<Comment, 'guest' | 'resolved' | 'createdAt'> & { authorId: string | null, resolvedAt: Date | null, createdAt: Date }

function toComment({ authorId, resolvedAt, createdAt, ...row }: Row): Comment {
  return { ...row, guest: authorId === null, resolved: resolvedAt !== null, createdAt: createdAt.toISOString() }
}

const select = () => database().select(columns).from(comments).leftJoin(users, eq(users.id, comments.authorId))

export function commentsOf(scenarioId: string): Comment[] {
  return select().where(eq(comments.scenarioId, scenarioId)).orderBy(asc(comments.createdAt), asc(comments.id)).all().map(toComment)
}

function commentOf(scenarioId: string, id: string): Comment | undefined {
  const row = select().where(and(eq(comments.scenarioId, scenarioId), eq(comments.id, id))).get()
  return row && toComment(row)
}

/** The new comment; undefined when the comment it replies to is not a first-level one of this scenario. */
export function addComment(scenarioId: string, author: Author, body: CreateCommentBody): Comment | undefined {
  return atomically((store) => {
    if (body.parentId !== undefined) {
      const parent = store.select({ id: comments.id }).from(comments)
        .where(and(eq(comments.id, body.parentId), eq(comments.scenarioId, scenarioId), isNull(comments.parentId))).get()
      if (parent === undefined) return undefined
    }
    const scenario = store.select({ version: scenarios.version }).from(scenarios).where(eq(scenarios.id, scenarioId)).get()
    const id = shortId()
    store.insert(comments).values({
      id, scenarioId, parentId: body.parentId ?? null, body: body.body, anchor: body.anchor ?? null, designPoint: body.designPoint ?? null,
      scenarioVersion: scenario?.version ?? 1, createdAt: new Date(),
      ...('userId' in author ? { authorId: author.userId } : { guestName: author.guestName, linkId: author.linkId }),
    }).run()
    return commentOf(scenarioId, id)
  })
}

export function setResolved(scenarioId: string, id: string, resolved: boolean): Comment | undefined {
  database().update(comments).set({ resolvedAt: resolved ? new Date() : null })
    .where(and(eq(comments.scenarioId, scenarioId), eq(comments.id, id))).run()
  return commentOf(scenarioId, id)
}
