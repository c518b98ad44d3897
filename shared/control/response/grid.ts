import type { Complex } from '../../numerics/complex'

/** Turn (radians) of the fastest living pole over one piece: the polynomial of degree 8 through it is then good to 1e-10. */
const pieceAngle = 1
/** A pole is gone after so many of its time constants. */
const lifetimes = 40
/** Halvings of an interval that a grid may take. */
const finest = 12

/**
 * Lengths of pieces that fill an interval, shorter after its start while what fast poles do there still lives.
 * @param length seconds
 * @param always rad/s of a movement that never dies out in the interval
 */
export function gridOf(length: number, poles: readonly Complex[], always: number): number[] {
  const moving = poles.map(({ re, im }) => ({ speed: Math.hypot(re, im), life: re < 0 ? lifetimes / -re : Infinity }))
  const lengths: number[] = []
  const units = 2 ** finest
  for (let at = 0; at < units;) {
    const fastest = moving.reduce((most, { speed, life }) => at / units * length < life ? Math.max(most, speed) : most, always)
    let size = units
    while (size > 1 && (size / units * length * fastest > pieceAngle || at % size !== 0)) size /= 2
    lengths.push(size / units * length)
    at += size
  }
  return lengths
}
