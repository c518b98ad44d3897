import type { Comment, CreateCommentBody } from '#shared/schemas/comment'
import { addComment, type Author } from '../database/queries/comments'
import { badRequest } from './errors'
import { publish } from './live'

/** Keeps a comment and tells everyone who watches. */
export function postComment(scenarioId: string, author: Author, body: CreateCommentBody): Comment {
  const comment = addComment(scenarioId, author, body)
  if (comment === undefined) throw badRequest([{ path: 'parentId', message: 'there is no such comment to reply to' }])
  publish(scenarioId, { event: 'comment', data: comment })
  return comment
}
