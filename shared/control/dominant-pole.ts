import { abs, type Complex } from '../numerics/complex'
import { evaluateComplex } from '../numerics/polynomial'
import type { LoopFunctions } from './controller'
import { evaluateQuasi } from './delay/quasi-polynomial'

/**
 * The closed-loop pole (im >= 0) that stands for a design whose gains were given: in a stable loop the complex pair with the largest share of the
 * step response (size of its residue), or the real pole nearest the imaginary axis where no pair exists; in an unstable loop the rightmost
 * pole. null where there are no poles.
 */
export function dominantPole(poles: readonly Complex[], functions: LoopFunctions): Complex | null {
  if (poles.length === 0) return null
  const rightmost = poles.reduce((most, pole) => pole.re > most.re ? pole : most)
  const pairs = poles.filter(pole => pole.im > 0)
  if (rightmost.re >= 0 || pairs.length === 0) return { re: rightmost.re, im: Math.abs(rightmost.im) }
  const share = new Map(pairs.map(pole => [pole, stepResidue(pole, poles, functions)]))
  return pairs.reduce((most, pole) => share.get(pole)! > share.get(most)! ? pole : most)
}

/** |B(p)/(A'(p) p)| up to a factor common to all poles; an exactly repeated pole counts as boundless. */
function stepResidue(pole: Complex, poles: readonly Complex[], { reference, loop, deadTime }: LoopFunctions): number {
  let size = abs(evaluateComplex(reference.numerator, pole)) / abs(pole)
  if (deadTime > 0) return size * Math.exp(-pole.re * deadTime) / abs(evaluateQuasi({ ...loop, deadTime }, pole).slope)
  for (const other of poles) if (other !== pole) size /= Math.hypot(pole.re - other.re, pole.im - other.im)
  return Number.isNaN(size) ? 0 : size
}
