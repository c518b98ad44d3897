const golden = (Math.sqrt(5) - 1) / 2

/**
 * The largest value of a continuous function with one maximum between two points, by golden-section search (J. Kiefer, 1953). Near a smooth maximum the value is
 * good to the square of the tolerance.
 * @param tolerance width of the last bracket relative to |x|
 */
export function findMaximum(f: (x: number) => number, from: number, to: number, tolerance = 1e-7): { x: number, value: number } {
  let [a, b] = [from, to]
  let x = b - golden * (b - a)
  let y = a + golden * (b - a)
  let [fx, fy] = [f(x), f(y)]
  while (Math.abs(b - a) > tolerance * (Math.abs(a) + Math.abs(b))) {
    if (fx >= fy) {
      b = y
      y = x
      fy = fx
      x = b - golden * (b - a)
      fx = f(x)
    }
    else {
      a = x
      x = y
      fx = fy
      y = a + golden * (b - a)
      fy = f(y)
    }
  }
  return fx >= fy ? { x, value: fx } : { x: y, value: fy }
}
