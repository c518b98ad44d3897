/** Numbers are read first, so that the e of 1e5 is no name. */
const numberOrName = /(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?|([\p{L}_][\p{L}\p{N}_]*)/gu

/** The parameters that a formula names, in order of appearance; s is the Laplace variable. */
export function symbolsOf(expression: string): string[] {
  const names = [...expression.matchAll(numberOrName)].flatMap(match => match[1] === undefined || match[1] === 's' ? [] : [match[1]])
  return [...new Set(names)]
}
