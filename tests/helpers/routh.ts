/**
 * Routh's criterion in exact arithmetic: a witness of stability that knows no rounding. Written for the tests, from E. J. Routh, "A treatise on the
 * stability of a given state of motion" (1877), in the array form of the textbooks.
 */

/** A number as a whole multiple of a power of two, which every finite double is. */
interface Dyadic { mantissa: bigint, exponent: number }

function dyadic(x: number): Dyadic {
  if (!Number.isFinite(x)) throw new RangeError('a finite number')
  if (x === 0) return { mantissa: 0n, exponent: 0 }
  let exponent = Math.floor(Math.log2(Math.abs(x)))
  // Division and doubling are exact for every number that is not close to the ends of the range.
  let scaled = x / 2 ** exponent
  while (!Number.isInteger(scaled)) {
    scaled *= 2
    exponent--
  }
  return { mantissa: BigInt(scaled), exponent }
}

/** Coefficients as whole numbers, up to one common factor > 0. */
function wholeNumbers(coefficients: readonly Dyadic[]): bigint[] {
  const least = Math.min(...coefficients.filter(({ mantissa }) => mantissa !== 0n).map(({ exponent }) => exponent))
  return coefficients.map(({ mantissa, exponent }) => mantissa === 0n ? 0n : mantissa << BigInt(exponent - least))
}

/** D + K N with every product exact, as whole numbers up to a common factor. */
export function exactCharacteristic(denominator: readonly number[], gain: number, numerator: readonly number[]): bigint[] {
  const k = dyadic(gain)
  const shift = denominator.length - numerator.length
  const terms = denominator.flatMap((d, i) => {
    const n = dyadic(numerator[i - shift] ?? 0)
    return [dyadic(d), { mantissa: n.mantissa * k.mantissa, exponent: n.exponent + k.exponent }]
  })
  const whole = wholeNumbers(terms)
  return denominator.map((_, i) => whole[2 * i]! + whole[2 * i + 1]!)
}

/** Whether every root lies truly left of the imaginary axis: all entries of the array's first column have one sign, none is zero. */
export function isHurwitz(coefficients: readonly bigint[]): boolean {
  const first = coefficients.findIndex(c => c !== 0n)
  const p = coefficients.slice(first).map(c => coefficients[first]! < 0n ? -c : c)
  let upper = p.filter((_, i) => i % 2 === 0)
  let lower = p.filter((_, i) => i % 2 === 1)
  // Rows stay whole numbers: each is multiplied by the positive heads above it, which changes no sign.
  while (lower.length > 0) {
    const [a, b] = [upper[0]!, lower[0]!]
    if (b <= 0n) return false
    const next = upper.slice(1).map((c, i) => b * c - a * (lower[i + 1] ?? 0n))
    upper = lower
    lower = withoutCommonFactor(next)
  }
  return true
}

/** A row of an order-40 array would otherwise grow to millions of digits. */
function withoutCommonFactor(row: bigint[]): bigint[] {
  let common = 0n
  for (const entry of row) for (let a = entry < 0n ? -entry : entry; a !== 0n;) [common, a] = [a, common % a]
  return common > 1n ? row.map(entry => entry / common) : row
}
