const iterations = 200

/**
 * The root of a continuous function between two points where it has opposite signs (or is zero), by Brent's method
 * (R. P. Brent, "Algorithms for Minimization without Derivatives", 1973): never slower than bisection in the long run.
 * @param tolerance width of the last bracket relative to |x|
 * @throws RangeError where f does not change sign over the bracket
 */
export function findRoot(f: (x: number) => number, from: number, to: number, tolerance = 2 ** -52): number {
  let a = from
  let b = to
  let fa = f(a)
  let fb = f(b)
  if (fa === 0) return a
  if (fb === 0) return b
  if (Math.sign(fa) * Math.sign(fb) !== -1) throw new RangeError('the function does not change sign over the bracket')
  let c = a
  let fc = fa
  let step = b - a
  let before = step
  for (let i = 0; i < iterations; i++) {
    if (Math.sign(fb) === Math.sign(fc)) {
      c = a
      fc = fa
      step = before = b - a
    }
    if (Math.abs(fc) < Math.abs(fb)) {
      a = b
      b = c
      c = a
      fa = fb
      fb = fc
      fc = fa
    }
    const width = tolerance * Math.abs(b) + Number.MIN_VALUE
    const half = (c - b) / 2
    if (Math.abs(half) <= width || fb === 0) return b
    const proposed = interpolate(a, b, c, fa, fb, fc)
    if (Math.abs(before) >= width && Math.abs(proposed) < Math.min(1.5 * Math.abs(half), Math.abs(before / 2)) && proposed * half > 0) {
      before = step
      step = proposed
    }
    else step = before = half
    a = b
    fa = fb
    b += Math.abs(step) > width ? step : Math.sign(half) * width
    fb = f(b)
  }
  return b
}

/** The step from b by inverse quadratic interpolation, or by the secant where only two points differ. */
function interpolate(a: number, b: number, c: number, fa: number, fb: number, fc: number): number {
  if (Math.abs(fa) <= Math.abs(fb)) return NaN
  const s = fb / fa
  if (a === c) return -s * (a - b) / (1 - s)
  const q = fa / fc
  const r = fb / fc
  const p = s * ((c - b) * q * (q - r) - (b - a) * (r - 1))
  return -p / ((q - 1) * (r - 1) * (s - 1))
}
