import { abs, type Complex } from '../../numerics/complex'

export interface FrequencyRange { from: number, to: number }

/** The range of a loop without any dynamics. */
const anyRange: FrequencyRange = { from: 0.1, to: 10 }
/** Resonances narrower than this share of their frequency are drawn as one spike. */
const narrowest = 1e-3
/** Decades that the range reaches beyond the outermost break frequencies at least. */
const beyond = 0.5
/** Powers of ten that no frequency of a machine comes near, and whose squares are still numbers. */
const outermost = 150

/**
 * Half a decade to one and a half beyond the break frequencies (the sizes of the poles and zeros), at whole decades, so that the axis stands still
 * while they move. rad/s.
 */
export function usualRange(places: readonly Complex[]): FrequencyRange {
  const sizes = places.map(abs).filter(size => size > 0)
  if (sizes.length === 0) return anyRange
  return {
    from: decade(Math.min(outermost - 1, Math.max(-outermost, Math.floor(Math.log10(Math.min(...sizes)) - beyond)))),
    to: decade(Math.max(1 - outermost, Math.min(outermost, Math.ceil(Math.log10(Math.max(...sizes)) + beyond)))),
  }
}

/**
 * Rising frequencies: `count` of them evenly spaced on a logarithmic scale, and round each lightly damped root its own frequency with further ones
 * on both sides, each twice as far as the one before, from a quarter of the width of its resonance to the spacing of the grid.
 * @param places poles and zeros with their conjugates; up to 20 further frequencies for each pair
 */
export function sampleFrequencies({ from, to }: FrequencyRange, count: number, places: readonly Complex[]): number[] {
  const step = (Math.log(to) - Math.log(from)) / (count - 1)
  const even = Array.from({ length: count }, (_, i) => i === count - 1 ? to : from * Math.exp(i * step))
  const extra = places.filter(({ re, im }) => im > 0 && Math.abs(re) < step * im).flatMap((place) => {
    const offsets = [0]
    for (let offset = Math.max(Math.abs(place.re) / 4, narrowest * place.im); offset < step * place.im; offset *= 2) offsets.push(offset, -offset)
    return offsets.map(offset => place.im + offset)
  })
  return [...new Set([...even, ...extra.filter(w => w > from && w < to)])].sort((a, b) => a - b)
}

/** A power of ten to the last digit. */
function decade(exponent: number): number {
  return Number(`1e${exponent}`)
}
