import type { Anchor, Comment } from '#shared/schemas/comment'

/** A comment that stands by itself, with its number on the sheet and the answers to it, oldest first. */
export interface Thread {
  number: number
  root: Comment
  replies: Comment[]
}

/** An unresolved comment at the place on the bench that it is about. */
export interface Pin {
  id: string
  number: number
  anchor: Anchor
  selected: boolean
}

export function pinsOf(threads: readonly Thread[], selected: string | null): Pin[] {
  return threads.flatMap(({ number, root: { id, anchor, resolved } }) => anchor && !resolved ? [{ id, number, anchor, selected: id === selected }] : [])
}

/**
 * Threads in the order they were begun; numbers never change as others are added. A reply to a reply joins its thread, since
 * there is one level only; a reply whose thread is not there stands by itself rather than being lost.
 */
export function threadsOf(comments: readonly Comment[]): Thread[] {
  const oldestFirst = [...comments].sort((a, b) => a.createdAt.localeCompare(b.createdAt) || a.id.localeCompare(b.id))
  const byId = new Map(oldestFirst.map(comment => [comment.id, comment]))
  const threads = new Map<string, Thread>()
  for (const comment of oldestFirst) {
    const root = rootOf(comment, byId)
    const thread = threads.get(root.id)
    if (thread) thread.replies.push(comment)
    else threads.set(root.id, { number: threads.size + 1, root, replies: root === comment ? [] : [comment] })
  }
  return [...threads.values()]
}

function rootOf(comment: Comment, byId: ReadonlyMap<string, Comment>): Comment {
  const seen = new Set<string>()
  let root = comment
  while (root.parentId !== null && !seen.has(root.id)) {
    seen.add(root.id)
    const parent = byId.get(root.parentId)
    if (!parent) break
    root = parent
  }
  return root
}
