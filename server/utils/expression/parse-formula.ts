import { parse, type MathNode } from 'mathjs'
import { InvalidInputError } from '#shared/control/errors'
import type { TransferFunction } from '#shared/control/types'
import { limits } from '#shared/schemas/limits'
import type { Plant } from '#shared/schemas/loop'
import { functionNames, plainName } from '#shared/schemas/names'
import type { Dimension } from './dimension'
import { hasUnit, type Measure, measureOfNumber, measureOfPower, measureOfProduct, measureOfS, measureOfSum, unknownMeasure } from './measure'
import { type Quantity, readQuantities } from './quantities'
import { add, constant, divide, expand, isConstant, isZero, laplaceVariable, multiply, negate, OrderError, power, type Rational } from './rational'
import { type Leaf, scanFormula } from './scan'
import { unlikeTerms } from './unlike-terms'

/** Known without being declared; a parameter of the same name comes first. */
const constants: Record<string, number> = { pi: Math.PI, π: Math.PI }

/** A part of the formula. */
interface Term {
  ratio: Rational
  measure: Measure
}

interface Walk {
  path: string
  parameters: Record<string, Quantity>
  /** Numbers and names not met yet, in the order of the text. */
  leaves: Leaf[]
  text: string
  depth: number
}

/** A plant, and its dimension (output over input) where the units of its parameters tell it. */
export interface FormulaPlant extends TransferFunction {
  dimension: Dimension | null
}

/**
 * A plant from its formula in s and named parameters, such as `kt/(J*s^2 + b*s)`, in SI units.
 *
 * The text is parsed to a tree, and the tree is walked with a list of what is allowed: numbers, names, + - * / ^, signs and parentheses.
 * Nothing is ever evaluated. Multiplication may be left out between a number and a name (`2 s`) and binds tighter than division there.
 * Each part carries what is known of its unit, so that unlike terms are found where they are added.
 *
 * @param path the field of the request that carries the plant
 * @throws InvalidInputError at the character where the formula cannot be read or unlike terms meet, or at the unit that is not known
 */
export function parseFormula(plant: Pick<Extract<Plant, { form: 'expression' }>, 'expression' | 'parameters'>, path: string): FormulaPlant {
  const { text, leaves } = scanFormula(plant.expression, `${path}.expression`)
  const quantities = Object.entries(readQuantities(plant.parameters, `${path}.parameters`))
  const walk: Walk = {
    path: `${path}.expression`, parameters: Object.fromEntries(quantities.map(([name, quantity]) => [plainName(name), quantity])), leaves: [...leaves], text, depth: 0,
  }
  const { ratio, measure } = convert(parseTree(text, walk.path), walk)
  return { ...expand(ratio), dimension: measure.kind === 'known' ? measure.dimension : null }
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

function convert(node: MathNode, walk: Walk): Term {
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

function operation({ fn, op, args }: { fn: string, op: string, args: MathNode[] }, walk: Walk): Term {
  const [first, second] = args as [MathNode, MathNode]
  if (fn === 'unaryMinus') {
    const { ratio, measure } = deeper(walk, () => convert(first, walk))
    return { ratio: negate(ratio), measure }
  }
  if (fn === 'unaryPlus') return deeper(walk, () => convert(first, walk))
  if (args.length !== 2 || !['add', 'subtract', 'multiply', 'divide', 'pow'].includes(fn)) {
    return refuse(walk, () => `"${op}" has no place in a formula; use + - * / ^ ( )`)
  }
  const left = convert(first, walk)
  const position = walk.leaves[0]?.position
  const right = fn === 'pow' ? deeper(walk, () => convert(second, walk)) : convert(second, walk)
  const fault = (message: string) => new InvalidInputError(walk.path, message, position)
  try {
    const ratio = finite(combine(fn, left.ratio, right.ratio, fault), fault)
    const measure = combineMeasures(fn, left, right, fault)
    if (measure === null) throw fault(unlikeTerms({ node: first, measure: left.measure }, { node: second, measure: right.measure }))
    return { ratio, measure }
  } catch (error) {
    if (error instanceof OrderError) throw fault(`the formula grows beyond order ${limits.totalOrder} here`)
    throw error
  }
}

function combine(fn: string, left: Rational, right: Rational, fault: (message: string) => Error): Rational {
  switch (fn) {
    case 'add': return add(left, right)
    case 'subtract': return add(left, negate(right))
    case 'multiply': return multiply(left, right)
    case 'divide':
      if (isZero(right)) throw fault('this divides by zero')
      return divide(left, right)
    default: return raise(left, right, fault)
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

/** Null where unlike terms are added. */
function combineMeasures(fn: string, left: Term, right: Term, fault: (message: string) => Error): Measure | null {
  switch (fn) {
    case 'multiply': return measureOfProduct(left.measure, right.measure, 1)
    case 'divide': return measureOfProduct(left.measure, right.measure, -1)
    case 'pow':
      if (hasUnit(right.measure)) throw fault('an exponent is a plain number, without a unit')
      return measureOfPower(left.measure, right.ratio.numerator[0] as number)
    default: return measureOfSum(left.measure, right.measure)
  }
}

function finite(value: Rational, fault: (message: string) => Error): Rational {
  if ([...value.numerator, ...value.factors.flat()].every(Number.isFinite)) return value
  throw fault('the numbers grow beyond what can be computed here')
}

function number(value: number, walk: Walk): Term {
  const read = walk.leaves.shift()
  // The tree and the text must tell of the same number: other ways of writing one (0x10) would shift every name after it.
  if (Number(read?.text) !== value) throw new InvalidInputError(walk.path, 'this number cannot be read; write it with decimal digits', read?.position)
  if (!Number.isFinite(value)) throw new InvalidInputError(walk.path, 'this is no finite number', read?.position)
  // Nothing is nothing in every unit.
  return { ratio: constant(value), measure: value === 0 ? unknownMeasure : measureOfNumber }
}

function notAFunction(name: string): string {
  if (!functionNames.includes(name)) return `${name} is not a function; to multiply, write a * before the parenthesis`
  return `a plant is a ratio of polynomials in s: ${name} cannot stand in it`
}

/** The name as it stands in the text. */
function symbol(walk: Walk): Term {
  const { text: name, position } = walk.leaves.shift() as Leaf
  if (name === 's') return { ratio: laplaceVariable, measure: measureOfS }
  const parameter = Object.hasOwn(walk.parameters, name) ? walk.parameters[name] : undefined
  if (parameter !== undefined) return { ratio: constant(parameter.value), measure: parameter.measure }
  if (Object.hasOwn(constants, name)) return { ratio: constant(constants[name] as number), measure: measureOfNumber }
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
