import { z } from 'zod'

/** Line breaks, control characters, and the signs that turn the direction of what follows them. */
const unfitForOneLine = /[\p{Cc}\u2028\u2029\u202A-\u202E\u2066-\u2069]/u

/** One line of a person's words: trimmed, without signs that would disturb the text around it. */
export function lineOfText(most: number) {
  return z.string().trim().max(most, `this takes at most ${most} characters`).refine(text => !unfitForOneLine.test(text), 'this holds characters that cannot be shown in one line')
}

/** A name that can be seen. */
export function visibleName(most: number, missing: string) {
  return lineOfText(most).refine(text => /[\p{L}\p{N}]/u.test(text), missing)
}
