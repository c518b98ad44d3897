import type { z } from 'zod'
import type { Issue } from '#shared/schemas/errors'

type ZodIssue = z.core.$ZodIssue

/** More faults than this nobody reads, and an answer need not be longer than its question. */
const most = 20
const longest = 200

/** The faults that zod found, each with the dotted path of its field. */
export function issuesOf(error: z.ZodError): Issue[] {
  return error.issues.slice(0, most).flatMap(issue => flatten(issue, [])).slice(0, most)
    .map(({ path, message }) => ({ path: shortened(path), message: shortened(message) }))
}

function shortened(text: string): string {
  return text.length > longest ? `${text.slice(0, longest - 1)}…` : text
}

function flatten(issue: ZodIssue, parents: PropertyKey[]): Issue[] {
  const path = [...parents, ...issue.path]
  if (issue.code === 'unrecognized_keys') {
    return issue.keys.map(key => ({ path: dotted([...path, key]), message: 'unknown field' }))
  }
  if (issue.code === 'invalid_union' && issue.errors.length > 0) {
    return closestBranch(issue.errors).flatMap(inner => flatten(inner, path))
  }
  if (issue.code === 'invalid_key' && issue.issues.length > 0) {
    return issue.issues.map(inner => ({ path: dotted(path), message: inner.message }))
  }
  return [{ path: dotted(path), message: plain(issue) }]
}

/** Of the shapes a union admits, the one whose fields are least wrong: a wrong value is nearer than an unknown or missing field. */
function closestBranch(branches: ZodIssue[][]): ZodIssue[] {
  const distance = (branch: ZodIssue[]) => branch.reduce((sum, issue) => {
    if (issue.code === 'unrecognized_keys') return sum + 3 * issue.keys.length
    return sum + (issue.code === 'invalid_type' && issue.input === undefined ? 2 : 1)
  }, 0)
  return branches.reduce((best, branch) => distance(branch) < distance(best) ? branch : best)
}

function plain(issue: ZodIssue): string {
  if (issue.code === 'invalid_type' && issue.expected === 'number') return 'a finite number is needed here'
  return issue.message
}

function dotted(path: PropertyKey[]): string {
  return path.map(String).join('.')
}
