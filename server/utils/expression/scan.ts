import { InvalidInputError } from '#shared/control/errors'
import { limits } from '#shared/schemas/limits'
import { namePattern, reservedWords } from '#shared/schemas/names'

/** Typographic signs that people paste, as the plain ones; each is one character, so positions stay true. */
const plainSigns: Record<string, string> = { '·': '*', '×': '*', '⋅': '*', '−': '-', '–': '-', '÷': '/', '\u00a0': ' ', 'µ': 'μ' }

const admitted = new RegExp(`${namePattern}|[0-9_.+\\-*/^()\\s]`)
const leaf = new RegExp(`(?:\\d+\\.?\\d*|\\.\\d+)(?:[eE][+-]?\\d+)?|${namePattern}`, 'g')
const raised = '⁰¹²³⁴⁵⁶⁷⁸⁹'

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
    if (raised.includes(sign)) throw new InvalidInputError(path, `write ^${raised.indexOf(sign)} in place of ${sign}`, position)
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
  const reserved = leaves.find(({ text: word }) => reservedWords.includes(word))
  if (reserved !== undefined) throw new InvalidInputError(path, `${reserved.text} is a reserved word; name the parameter otherwise`, reserved.position)
  return { text, leaves }
}
