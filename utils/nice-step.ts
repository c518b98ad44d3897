/** The smallest of 1, 2 and 5 times a power of ten that is not below `least` (> 0). */
export function niceStep(least: number): number {
  const power = 10 ** Math.floor(Math.log10(least))
  // A tolerance, so that 0.2 asked for as 0.20000000000000001 does not become 0.5.
  const factor = [1, 2, 5].find(candidate => candidate * power >= least * (1 - 1e-9)) ?? 10
  // Division by a whole power keeps 0.2 exact where multiplication by 0.1 would give 0.20000000000000001.
  return power >= 1 ? factor * power : factor / Math.round(1 / power)
}
