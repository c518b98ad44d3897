import type { Complex } from './complex'
import { evaluateCompensated } from './compensated'
import { evaluate } from './polynomial'
import type { RootPlaces } from './simultaneous-roots'

const unitRoundoff = 2 ** -53
/** Below this share of |z| a part of a root is rounding, not position. */
const negligible = 8 * unitRoundoff
const realPolishSteps = 4

/**
 * The roots of a real polynomial made exactly symmetric: mirror pairs, and real roots with im exactly 0.
 * Each root above the axis takes the nearest mirror below it, the farthest from the axis first, unless both lie nearer to the axis than
 * to each other's mirror. A root left without partner is real.
 */
export function pairConjugates(p: Float64Array, { re, im }: RootPlaces): Complex[] {
  const result: Complex[] = []
  const upper: number[] = []
  const lower: number[] = []
  for (let i = 0; i < re.length; i++) {
    if (Math.abs(im[i]!) <= negligible * Math.abs(re[i]!)) result.push(realRoot(p, re[i]!))
    else (im[i]! > 0 ? upper : lower).push(i)
  }
  upper.sort((a, b) => im[b]! - im[a]!)
  for (const i of upper) {
    const mirrorGap = (j: number) => Math.hypot(re[i]! - re[j]!, im[i]! + im[j]!)
    const j = lower.length > 0 ? lower.reduce((best, next) => mirrorGap(next) < mirrorGap(best) ? next : best) : -1
    if (j < 0 || mirrorGap(j) > im[i]! - im[j]!) {
      result.push(realRoot(p, re[i]!))
      continue
    }
    lower.splice(lower.indexOf(j), 1)
    const x = (re[i]! + re[j]!) / 2
    const y = (im[i]! - im[j]!) / 2
    const onAxis = Math.abs(x) <= negligible * y
    result.push({ re: onAxis ? 0 : x, im: y }, { re: onAxis ? 0 : x, im: -y })
  }
  for (const i of lower) result.push(realRoot(p, re[i]!))
  return result
}

/** Dropping a rounding-size imaginary part may cost the last digits: a few real Newton steps, kept while they shrink, restore them. */
function realRoot(p: Float64Array, start: number): Complex {
  const n = p.length - 1
  const slope = Array.from(p.subarray(0, n), (coefficient, i) => coefficient * (n - i))
  let x = start
  let last = 1e-12 * Math.abs(start)
  for (let i = 0; i < realPolishSteps; i++) {
    const step = evaluateCompensated(p, x) / evaluate(slope, x)
    if (!(Math.abs(step) < last / 2)) break
    x -= step
    last = Math.abs(step)
  }
  return { re: x, im: 0 }
}
