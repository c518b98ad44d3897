import { functionNames, namePattern, reservedWords } from '#shared/schemas/names'

/** Numbers are read first, so that the e of 1e5 is no name. */
const numberOrName = new RegExp(`(?:\\d+\\.?\\d*|\\.\\d+)(?:[eE][+-]?\\d+)?|(${namePattern})`, 'g')
const noParameter = new Set(['s', ...reservedWords, ...functionNames])

/** The parameters that a formula names, in order of appearance. */
export function symbolsOf(expression: string): string[] {
  const names = [...expression.matchAll(numberOrName)].flatMap(match => match[1] === undefined || noParameter.has(match[1]) ? [] : [match[1]])
  return [...new Set(names)]
}
