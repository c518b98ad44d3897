import { limits } from './limits'

/** Letters of names in formulas: Latin and Greek, which the formula parser reads; the micro sign stands for the letter mu. */
const letter = 'A-Za-zÀ-ÖØ-öø-ʯͰ-Ͽµ'

/** A parameter's name, or a name wherever one stands in a formula. */
export const namePattern = `[${letter}][${letter}0-9_]*`

/** Words with a meaning of their own to the formula parser. */
export const reservedWords: readonly string[] = [
  'true', 'false', 'null', 'undefined', 'NaN', 'Infinity', 'mod', 'to', 'in', 'and', 'or', 'xor', 'not', 'end',
]

/** Functions that people try, none of which is rational in s. */
export const functionNames: readonly string[] = ['exp', 'sin', 'cos', 'tan', 'asin', 'acos', 'atan', 'sinh', 'cosh', 'tanh', 'sqrt', 'log', 'ln', 'abs']

/** What is wrong with a name for a parameter, or null. */
export function faultOfName(name: string): string | null {
  if (name.length > limits.parameterName) return `a parameter name has at most ${limits.parameterName} characters`
  if (!new RegExp(`^${namePattern}$`).test(name)) return 'a parameter name is a Latin or Greek letter followed by letters, digits or underscores'
  if (name === 's') return 's is the Laplace variable and cannot be a parameter'
  return reservedWords.includes(name) ? `${name} is a reserved word and cannot be a parameter` : null
}

/** Two signs look like mu; in names they are one. */
export function plainName(name: string): string {
  return name.replaceAll('µ', 'μ')
}
