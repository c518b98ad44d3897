/**
 * Loops of a given order for the benchmark, made by rule: an integrator and lags spread over two decades, with a damped pair for every
 * fourth pole, as a geared axis with a flexible drive has them. Invented for timing alone.
 */
export function loopOfOrder(order) {
  let denominator = [1, 0]
  for (let n = 1; n < order; n += 1) {
    if (n % 4 === 3 && n + 1 < order) {
      const frequency = 3 * 1.6 ** n
      denominator = times(denominator, [1, 0.3 * frequency, frequency * frequency])
      n += 1
    } else {
      denominator = times(denominator, [1, 1.5 * 1.4 ** n])
    }
  }
  const gain = denominator.findLast(coefficient => coefficient !== 0)
  return { plant: { numerator: [gain], denominator }, rateFeedback: 0 }
}

function times(p, q) {
  const product = new Array(p.length + q.length - 1).fill(0)
  for (const [i, a] of p.entries()) for (const [j, b] of q.entries()) product[i + j] += a * b
  return product
}
