import { evaluateComplexCompensated, productError } from './compensated'

/** Places of all roots: parallel arrays of real and imaginary parts. */
export interface RootPlaces {
  re: Float64Array
  im: Float64Array
}

const unitRoundoff = 2 ** -53
const plainIterations = 200
const fineIterations = 60

/**
 * Aberth-Ehrlich iteration on all roots at once, first in plain arithmetic to its noise level, then with compensated evaluation.
 * It stops by count at the latest and never throws: clusters stay as good as the arithmetic lets them.
 * @param p descending coefficients, first and last non-zero, the variable scaled so that roots lie around |z| = 1
 */
export function findSimultaneously(p: Float64Array): RootPlaces {
  const slope = slopeOf(p)
  const places = startingPoints(p)
  const reversed = p.slice().reverse()
  const evaluation = new Float64Array(3)
  iterate(places, plainIterations, (x, y) => newtonPlain(p, reversed, x, y, evaluation), evaluation)
  iterate(places, fineIterations, (x, y) => newtonCompensated(p, slope, x, y, evaluation), evaluation)
  return places
}

/** Steps each root that is not settled yet; `newton` leaves [correction re, correction im, settled (1 or 0)] in `evaluation`. */
function iterate(places: RootPlaces, limit: number, newton: (x: number, y: number) => void, evaluation: Float64Array): void {
  const { re, im } = places
  const n = re.length
  const settled = new Uint8Array(n)
  for (let round = 0, open = n; round < limit && open > 0; round++) {
    for (let i = 0; i < n; i++) {
      if (settled[i]) continue
      newton(re[i]!, im[i]!)
      if (evaluation[2] === 1) {
        settled[i] = 1
        open--
        continue
      }
      const step = aberthStep(places, i, evaluation[0]!, evaluation[1]!)
      re[i]! -= step.re
      im[i]! -= step.im
      if (Math.abs(step.re) + Math.abs(step.im) <= unitRoundoff * (Math.abs(re[i]!) + Math.abs(im[i]!))) {
        settled[i] = 1
        open--
      }
    }
  }
}

/** Newton's correction N made aware of the other roots: N / (1 - N sum 1/(z_i - z_j)). */
function aberthStep({ re, im }: RootPlaces, i: number, newtonRe: number, newtonIm: number): { re: number, im: number } {
  let sumRe = 0
  let sumIm = 0
  for (let j = 0; j < re.length; j++) {
    if (j === i) continue
    const x = re[i]! - re[j]!
    const y = im[i]! - im[j]!
    const square = x * x + y * y
    if (square === 0) continue
    sumRe += x / square
    sumIm -= y / square
  }
  const x = 1 - (newtonRe * sumRe - newtonIm * sumIm)
  const y = -(newtonRe * sumIm + newtonIm * sumRe)
  const square = x * x + y * y
  if (!(square > 1e-200)) return { re: newtonRe, im: newtonIm }
  return { re: (newtonRe * x + newtonIm * y) / square, im: (newtonIm * x - newtonRe * y) / square }
}

/** p/p' by Horner; outside the unit circle on the reversed polynomial, so that powers do not overflow (Bini 1996). */
function newtonPlain(p: Float64Array, reversed: Float64Array, x: number, y: number, out: Float64Array): void {
  const outside = x * x + y * y > 1
  const size = Math.hypot(x, y)
  const u = outside ? x / size / size : x
  const v = outside ? -y / size / size : y
  const coefficients = outside ? reversed : p
  const radius = outside ? 1 / size : size
  const n = p.length - 1
  let re = coefficients[0]!
  let im = 0
  let slopeRe = 0
  let slopeIm = 0
  let bound = Math.abs(re)
  for (let i = 1; i <= n; i++) {
    const nextSlope = slopeRe * u - slopeIm * v + re
    slopeIm = slopeRe * v + slopeIm * u + im
    slopeRe = nextSlope
    const next = re * u - im * v + coefficients[i]!
    im = re * v + im * u
    re = next
    bound = bound * radius + Math.abs(coefficients[i]!)
  }
  if (outside) {
    // With q(w) = w^n p(1/w), w = 1/z: p/p' = q / (n w q - w^2 q').
    const wSlopeRe = u * slopeRe - v * slopeIm
    const wSlopeIm = u * slopeIm + v * slopeRe
    const a = n * re - wSlopeRe
    const b = n * im - wSlopeIm
    slopeRe = u * a - v * b
    slopeIm = u * b + v * a
  }
  quotient(re, im, slopeRe, slopeIm, out)
  out[2] = Math.hypot(re, im) <= 4 * n * unitRoundoff * bound ? 1 : 0
}

function newtonCompensated(p: Float64Array, slope: Slope, x: number, y: number, out: Float64Array): void {
  const n = p.length - 1
  const size = Math.hypot(x, y)
  evaluateComplexCompensated(p, x, y, out)
  const re = out[0]!
  const im = out[1]!
  let bound = Math.abs(p[0]!)
  for (let i = 1; i <= n; i++) bound = bound * size + Math.abs(p[i]!)
  evaluateSlope(slope, x, y, out)
  quotient(re, im, out[0]!, out[1]!, out)
  // Not finite: the powers overflowed for a root very far out; the plain result stands.
  out[2] = Math.hypot(re, im) <= 4 * n * unitRoundoff * unitRoundoff * bound || !Number.isFinite(out[0]! + out[1]!) ? 1 : 0
}

/** Coefficients of p', each as a sum of two numbers, which makes it exact. */
interface Slope { high: Float64Array, low: Float64Array }

function slopeOf(p: Float64Array): Slope {
  const n = p.length - 1
  const high = new Float64Array(n)
  const low = new Float64Array(n)
  for (let i = 0; i < n; i++) {
    high[i] = p[i]! * (n - i)
    low[i] = productError(p[i]!, n - i, high[i]!)
  }
  return { high, low }
}

/** p' into out[0], out[1]: plainly where that is good to four digits, else with compensated evaluation, or Newton would not know where to go. */
function evaluateSlope({ high, low }: Slope, x: number, y: number, out: Float64Array): void {
  const size = Math.hypot(x, y)
  let re = 0
  let im = 0
  let lowRe = 0
  let lowIm = 0
  let bound = 0
  for (let i = 0; i < high.length; i++) {
    const next = re * x - im * y + high[i]!
    im = re * y + im * x
    re = next
    const nextLow = lowRe * x - lowIm * y + low[i]!
    lowIm = lowRe * y + lowIm * x
    lowRe = nextLow
    bound = bound * size + Math.abs(high[i]!)
  }
  if (Math.hypot(re, im) > 1e4 * high.length * unitRoundoff * bound) {
    out[0] = re
    out[1] = im
    return
  }
  evaluateComplexCompensated(high, x, y, out)
  out[0]! += lowRe
  out[1]! += lowIm
}

/** (a + jb)/(c + jd) into out[0], out[1]; a vanished slope gives a small sideways step instead of an infinite one. */
function quotient(a: number, b: number, c: number, d: number, out: Float64Array): void {
  const size = Math.hypot(c, d)
  if (size === 0) {
    out[0] = 1e-3
    out[1] = 1e-3
    return
  }
  const u = c / size
  const v = d / size
  out[0] = (a * u + b * v) / size
  out[1] = (b * u - a * v) / size
}

/** Circles whose radii are read off the upper convex hull of log |a_k|: widely spread roots start near their true sizes. */
function startingPoints(p: Float64Array): RootPlaces {
  const n = p.length - 1
  const height = (power: number) => Math.log(Math.abs(p[n - power]!))
  const hull: number[] = []
  for (let power = 0; power <= n; power++) {
    if (p[n - power] === 0) continue
    while (hull.length >= 2 && !turnsRight(hull[hull.length - 2]!, hull[hull.length - 1]!, power, height)) hull.pop()
    hull.push(power)
  }
  const re = new Float64Array(n)
  const im = new Float64Array(n)
  for (let side = 0, i = 0; side < hull.length - 1; side++) {
    const count = hull[side + 1]! - hull[side]!
    const radius = Math.exp((height(hull[side]!) - height(hull[side + 1]!)) / count)
    for (let k = 0; k < count; k++, i++) {
      // The offsets keep the start off the real axis and off any symmetry, from which the iteration could not escape.
      const angle = 2 * Math.PI * (k / count + side / n) + 0.7
      re[i] = radius * Math.cos(angle)
      im[i] = radius * Math.sin(angle)
    }
  }
  return { re, im }
}

function turnsRight(a: number, b: number, c: number, height: (power: number) => number): boolean {
  return (height(b) - height(a)) * (c - b) > (height(c) - height(b)) * (b - a)
}
