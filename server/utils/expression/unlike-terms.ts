import type { MathNode } from 'mathjs'
import type { Measure } from './measure'
import { writeDimension } from './write-unit'

interface Term {
  node: MathNode
  measure: Measure
}

const longestTerm = 40
const plainNumbers = ['1', '-']

/** Why two terms cannot be added, such as "J*s^2 is in N m, b in kg: unlike terms cannot be added". */
export function unlikeTerms(left: Term, right: Term): string {
  const [first, second] = [unitOf(left), unitOf(right)]
  const sentence = `${said(left)} ${first === '' ? 'has no unit' : `is in ${first}`}, ${said(right)} ${second === '' ? 'has none' : `in ${second}`}: unlike terms cannot be added`
  return [left, right].some(({ measure }) => measure.kind === 'bare') ? `${sentence}; a number gets a unit as a parameter` : sentence
}

/** As it was typed, where the term is one parameter; empty for a plain number. */
function unitOf({ measure }: Term): string {
  if (measure.kind === 'unknown') return ''
  if (measure.kind === 'known' && measure.written !== undefined) return plainNumbers.includes(measure.written) ? '' : measure.written
  return writeDimension(measure.dimension)
}

/** The term as it was typed, but for its spaces. */
function said({ node }: Term): string {
  const text = node.toString().replace(/ ([*/^]) /g, '$1')
  return text.length > longestTerm ? `${text.slice(0, longestTerm - 1)}…` : text
}
