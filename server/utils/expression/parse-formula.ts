import { parse, type MathNode } from 'mathjs'
import { InvalidInputError } from '#shared/control/errors'
import type { TransferFunction } from '#shared/control/types'
import { limits } from '#shared/schemas/limits'
import type { Parameter } from '#shared/schemas/loop'
import { functionNames, plainName } from '#shared/schemas/names'
import { add, constant, divide, expand, isConstant, isZero, laplaceVariable, multiply, negate, OrderError, power, type Rational } from './rational'
import { type Leaf, scanFormula } from './scan'

/** Known without being declared; a parameter of the same name comes first. */
const constants: Record<string, number> = { pi: Math.PI, π: Math.PI }

interface Walk {
  path: string
  parameters: Record<string, Parameter>
  /** Numbers and names not met yet, in the order of the text. */
  leaves: Leaf[]
  text: string
  depth: number
}

/**
 * A plant from its formula in s and named parameters, such as `kt/(J*s^2 + b*s)`.
 *
 * The text is parsed to a tree, and the tree is walked with a list of what is allowed: numbers, names, + - * / ^, signs and parentheses.
 * Nothing is ever evaluated. Multiplication may be left out between a number and a name (`2 s`) and binds tighter than division there.
 *
 * @param path the field of the request that carries the formula
 * @throws InvalidInputError at the character where the formula cannot be read
 */
export function parseFormula(formula: string, parameters: Record<string, Parameter>, path: string): TransferFunction {
  const { text, leaves } = scanFormula(formula, path)
  const plain = Object.fromEntries(Object.entries(parameters).map(([name, parameter]) => [plainName(name), parameter]))
  const walk: Walk = { path, parameters: plain, leaves: [...leaves], text, depth: 0 }
  return expand(convert(parseTree(text, path), walk))
}

function parseTree(text: string, path: string): MathNode {
  try {
    return parse(text)
  } catch (error) {
    const { message, char } = error as Error & { char?: number }
    const position = char === undefined ? undefined : Math.min(Math.max(char - 1, 0), Math.max(text.length - 1, 0))
    throw new InvalidInputError(path, `the formula breaks off here: ${message.replace(/ \(char \d+\)$/, '')}`, position)
  }
}

function convert(node: MathNode, walk: Walk): Rational {
  const parts = node as unknown as { value?: unknown, name?: string, content?: MathNode, op?: string, fn?: unknown, args?: MathNode[] }
  switch (node.type) {
    case 'ConstantNode': return number(parts.value as number, walk)
    case 'SymbolNode': return symbol(walk)
    case 'ParenthesisNode': return deeper(walk, () => convert(parts.content as MathNode, walk))
    case 'OperatorNode': return operation(parts as { fn: string, op: string, args: MathNode[] }, walk)
    case 'FunctionNode': return refuse(walk, notAFunction)
    default: return refuse(walk, () => 'this has no place in a formula; use + - * / ^ ( ), numbers, parameters and s')
  }
}

function operation({ fn, op, args }: { fn: string, op: string, args: MathNode[] }, walk: Walk): Rational {
  const [first, second] = args as [MathNode, MathNode]
  if (fn === 'unaryMinus') return negate(deeper(walk, () => convert(first, walk)))
  if (fn === 'unaryPlus') return deeper(walk, () => convert(first, walk))
  if (args.length !== 2 || !['add', 'subtract', 'multiply', 'divide', 'pow'].includes(fn)) {
    return refuse(walk, () => `"${op}" has no place in a formula; use + - * / ^ ( )`)
  }
  const left = convert(first, walk)
  const position = walk.leaves[0]?.position
  const right = fn === 'pow' ? deeper(walk, () => convert(second, walk)) : convert(second, walk)
  const fault = (message: string) => new InvalidInputError(walk.path, message, position)
  try {
    switch (fn) {
      case 'add': return finite(add(left, right), fault)
      case 'subtract': return finite(add(left, negate(right)), fault)
      case 'multiply': return finite(multiply(left, right), fault)
      case 'divide':
        if (isZero(right)) throw fault('this divides by zero')
        return finite(divide(left, right), fault)
      default: return finite(raise(left, right, fault), fault)
    }
  } catch (error) {
    if (error instanceof OrderError) throw fault(`the formula grows beyond order ${limits.totalOrder} here`)
    throw error
  }
}

function raise(base: Rational, exponent: Rational, fault: (message: string) => Error): Rational {
  if (!isConstant(exponent)) throw fault('an exponent must be a number, not a function of s')
  const n = exponent.numerator[0] as number
  if (isZero(base) && n <= 0) throw fault('zero has no such power')
  if (isConstant(base)) return constant((base.numerator[0] as number) ** n)
  if (!Number.isInteger(n)) throw fault('s and what contains it take whole exponents only')
  return power(base, n)
}

function finite(value: Rational, fault: (message: string) => Error): Rational {
  if ([...value.numerator, ...value.factors.flat()].every(Number.isFinite)) return value
  throw fault('the numbers grow beyond what can be computed here')
}

function number(value: number, walk: Walk): Rational {
  const read = walk.leaves.shift()
  // The tree and the text must tell of the same number: other ways of writing one (0x10) would shift every name after it.
  if (Number(read?.text) !== value) throw new InvalidInputError(walk.path, 'this number cannot be read; write it with decimal digits', read?.position)
  if (!Number.isFinite(value)) throw new InvalidInputError(walk.path, 'this is no finite number', read?.position)
  return constant(value)
}

function notAFunction(name: string): string {
  if (!functionNames.includes(name)) return `${name} is not a function; to multiply, write a * before the parenthesis`
  return `a plant is a ratio of polynomials in s: ${name} cannot stand in it`
}

/** The name as it stands in the text. */
function symbol(walk: Walk): Rational {
  const { text: name, position } = walk.leaves.shift() as Leaf
  if (name === 's') return laplaceVariable
  const parameter = Object.hasOwn(walk.parameters, name) ? walk.parameters[name] : undefined
  if (parameter !== undefined) return constant(parameter.value)
  if (Object.hasOwn(constants, name)) return constant(constants[name] as number)
  const call = /^\s*\(/.test(walk.text.slice(position + name.length))
  throw new InvalidInputError(walk.path, call ? notAFunction(name) : `${name} is not among the parameters`, position)
}

function refuse(walk: Walk, sentence: (name: string) => string): never {
  const here = walk.leaves[0]
  throw new InvalidInputError(walk.path, sentence(here?.text ?? 'this'), here?.position)
}

function deeper<T>(walk: Walk, work: () => T): T {
  walk.depth += 1
  if (walk.depth > limits.expressionDepth) {
    throw new InvalidInputError(walk.path, `the formula is nested deeper than ${limits.expressionDepth} levels`, walk.leaves[0]?.position)
  }
  const result = work()
  walk.depth -= 1
  return result
}
