import { InvalidInputError } from '#shared/control/errors'
import { limits } from '#shared/schemas/limits'

/** Typographic signs that people paste, as the plain ones; each is one character, so positions stay true. */
const plainSigns: Record<string, string> = { '·': '*', '×': '*', '⋅': '*', '−': '-', '–': '-', '÷': '/', '\u00a0': ' ' }

const admitted = /[\p{L}\p{N}_.+\-*/^()\s]/u
const leaf = /(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?|[\p{L}_][\p{L}\p{N}_]*/gu

export interface Leaf {
  text: string
  position: number
}

/**
 * Looks the formula over before it is parsed: foreign characters and deep nesting are refused at their character.
 * Answers with the text in plain signs and its numbers and names in order of appearance, which is also their order in the tree.
 */
export function scanFormula(formula: string, path: string): { text: string, leaves: Leaf[] } {
  const text = [...formula].map(sign => plainSigns[sign] ?? sign).join('')
  let depth = 0
  for (let position = 0; position < text.length; position += 1) {
    const sign = text[position] as string
    if (!admitted.test(sign)) {
      throw new InvalidInputError(path, `"${sign}" has no place in a formula; use + - * / ^ ( ), numbers, parameters and s`, position)
    }
    if (sign === '(') depth += 1
    if (sign === ')') depth -= 1
    if (depth > limits.expressionDepth) {
      throw new InvalidInputError(path, `the formula is nested deeper than ${limits.expressionDepth} parentheses`, position)
    }
  }
  const leaves = [...text.matchAll(leaf)].map(match => ({ text: match[0], position: match.index }))
  return { text, leaves }
}
