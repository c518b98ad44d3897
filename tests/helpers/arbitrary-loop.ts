import type { Complex } from '#shared/numerics/complex'
import { fromRoots } from '#shared/numerics/polynomial'
import type { TransferFunction } from '#shared/control/types'

interface Mixture {
  /** Shares of places in the right half plane, and exactly on the imaginary axis. */
  right: number
  onAxis: number
  /** Share of real places that come double. */
  doubled: number
}

function randomPlaces(random: () => number, count: number, { right, onAxis, doubled }: Mixture): Complex[] {
  const size = () => Math.exp(3 * random() - 1.5)
  const places: Complex[] = []
  while (places.length < count) {
    const re = random() < onAxis ? 0 : (random() < right ? 1 : -1) * size()
    if (count - places.length >= 2 && random() < 0.45) {
      const im = size()
      places.push({ re, im }, { re, im: -im })
    }
    else {
      places.push({ re, im: 0 })
      if (places.length < count && random() < doubled) places.push({ re, im: 0 })
    }
  }
  return places
}

/** A proper loop of the given order with everything that makes a locus hard: double and unstable poles, poles on the axis, negative gain, no excess of poles. */
export function randomLoop(random: () => number, order: number): TransferFunction {
  const zeros = Math.floor(random() * (order + 1))
  const gain = (random() < 0.25 ? -1 : 1) * Math.exp(4 * random() - 2)
  return {
    numerator: fromRoots(randomPlaces(random, zeros, { right: 0.25, onAxis: 0.05, doubled: 0.1 }), gain),
    denominator: fromRoots(randomPlaces(random, order, { right: 0.15, onAxis: 0.15, doubled: 0.1 })),
  }
}
