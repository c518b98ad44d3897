/** The golden section: what is left of an interval after each step. */
const share = (Math.sqrt(5) - 1) / 2
/** A maximum is flat: its place is known to half the digits of its value, and no step beyond that tells more. */
const finest = 2 ** -26

/**
 * The place of a maximum of f within [from, to], by golden section (J. Kiefer, "Sequential minimax search for a maximum", 1953). Where f has several
 * maxima there, it is one of them; where it has none inside, the nearer end.
 */
export function findMaximum(f: (x: number) => number, from: number, to: number): number {
  let [a, b] = [from, to]
  let [left, right] = [b - share * (b - a), a + share * (b - a)]
  let [atLeft, atRight] = [f(left), f(right)]
  while (b - a > finest * Math.max(Math.abs(a), Math.abs(b)) && left < right) {
    if (atLeft >= atRight) {
      [b, right, atRight] = [right, left, atLeft]
      left = b - share * (b - a)
      atLeft = f(left)
    }
    else {
      [a, left, atLeft] = [left, right, atRight]
      right = a + share * (b - a)
      atRight = f(right)
    }
  }
  return (a + b) / 2
}
