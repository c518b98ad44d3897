import fc from 'fast-check'
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

/**
 * e^(from/100) to e^(to/100), spread evenly over the exponent, to three digits, which read well in a counterexample. Neither drawn towards particular
 * values nor shrunk: both would let places fall together that have nothing to do with each other. Counts and kinds of places do shrink.
 */
const spread = (from: number, to: number) => fc.noShrink(fc.noBias(fc.integer({ min: from, max: to }).map(n => Number(Math.exp(n / 100).toPrecision(3)))))

/** Size of a place, between e^-1.5 and e^1.5. */
export const placeSize = spread(-150, 150)

const real = (re: number): Complex => ({ re, im: 0 })

/** One real place, the same twice, or a pair; the weights are in percent. */
function placeGroup({ right, onAxis, doubled }: Mixture): fc.Arbitrary<Complex[]> {
  const percent = (share: number) => Math.round(100 * share)
  const re = fc.oneof(
    { weight: percent((1 - right) * (1 - onAxis)), arbitrary: placeSize.map(s => -s) },
    { weight: percent(right * (1 - onAxis)), arbitrary: placeSize },
    { weight: percent(onAxis), arbitrary: fc.constant(0) },
  )
  return fc.oneof(
    { weight: percent(0.55 * (1 - doubled)), arbitrary: re.map(x => [real(x)]) },
    { weight: percent(0.55 * doubled), arbitrary: re.map(x => [real(x), real(x)]) },
    { weight: 45, arbitrary: fc.tuple(re, placeSize).map(([x, y]) => [{ re: x, im: y }, { re: x, im: -y }]) },
  )
}

/** So many places, conjugates beside each other; of a pair or a double place that no longer fits the real part alone is taken. */
function places(count: number, mixture: Mixture): fc.Arbitrary<Complex[]> {
  return fc.array(placeGroup(mixture), { minLength: count, maxLength: count }).map((groups) => {
    const taken: Complex[] = []
    for (const group of groups) taken.push(...(taken.length + group.length <= count ? group : [real(group[0]!.re)]).slice(0, count - taken.length))
    return taken
  })
}

/** Negative once in four. */
const gain = fc.tuple(fc.integer({ min: 0, max: 3 }), spread(-200, 200)).map(([sign, value]) => sign === 3 ? -value : value)

/** A gain between e^-3 and e. */
export const loopGain = spread(-300, 100)

/**
 * A proper loop of an order in the given range, with everything that makes a locus hard: double and unstable poles, poles on the axis, negative gain, no
 * excess of poles.
 */
export function arbitraryLoop(minOrder: number, maxOrder = minOrder): fc.Arbitrary<TransferFunction> {
  return fc.integer({ min: minOrder, max: maxOrder }).chain(order => fc.tuple(
    fc.integer({ min: 0, max: order }).chain(zeros => places(zeros, { right: 0.25, onAxis: 0.05, doubled: 0.1 })),
    places(order, { right: 0.15, onAxis: 0.15, doubled: 0.1 }),
    gain,
  )).map(([zeros, poles, k]) => ({ numerator: fromRoots(zeros, k), denominator: fromRoots(poles) }))
}

/** A strictly proper stable transfer function, zeros on either side, repeated poles now and then. */
export function arbitraryStable(minOrder: number, maxOrder = minOrder): fc.Arbitrary<TransferFunction & { poles: Complex[] }> {
  return fc.integer({ min: minOrder, max: maxOrder }).chain(order => fc.tuple(
    fc.integer({ min: 0, max: order - 1 }).chain(zeros => places(zeros, { right: 0.3, onAxis: 0.05, doubled: 0.1 })),
    places(order, { right: 0, onAxis: 0, doubled: 0.1 }),
    gain,
  )).map(([zeros, poles, k]) => ({ numerator: fromRoots(zeros, k), denominator: fromRoots(poles), poles }))
}

/** A place off the imaginary axis with im > 0: damping ratio 0.05 to 0.95, now and then to the right of the axis. */
export const arbitraryPoint: fc.Arbitrary<Complex> = fc.tuple(fc.integer({ min: -20, max: 95 }).filter(n => Math.abs(n) >= 5), placeSize)
  .map(([zeta, wn]) => ({ re: -zeta / 100 * wn, im: wn * Math.sqrt(1 - (zeta / 100) ** 2) }))
