/** What holds for every gain that placement returns: W. R. Evans, "Control system synthesis by root locus method" (1950), magnitude and angle condition. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { loopFunctions } from '#shared/control/controller'
import { NoAnswerError } from '#shared/control/errors'
import { placeGains, type Placement } from '#shared/control/placement'
import type { Controller, Gains, LoopModel } from '#shared/control/types'
import { distance, type Complex } from '#shared/numerics/complex'
import { roots } from '#shared/numerics/roots'
import { arbitraryLoop, arbitraryPoint, placeSize } from '../helpers/arbitrary-loop'
import { holds } from '../helpers/property'

/** A plant, now and then with an inner rate feedback, now and then with a sensor that lags. */
const arbitraryModel: fc.Arbitrary<LoopModel> = fc.record({
  plant: arbitraryLoop(1, 4),
  rateFeedback: fc.constantFrom(0, 0, 0.1),
  sensor: fc.option(placeSize.map(lag => ({ numerator: [1], denominator: [0.2 * lag, 1] })), { nil: undefined }),
}).map(({ sensor, ...model }) => sensor ? { ...model, sensor } : model)

const arbitraryFilter = fc.option(placeSize.map(time => 0.1 * time), { nil: undefined })
const withFilter = <T extends object>(form: T, derivativeFilter: number | undefined) => derivativeFilter === undefined ? form : { ...form, derivativeFilter }

const twoGainForms = fc.oneof<fc.Arbitrary<Controller>[]>(
  arbitraryFilter.map(filter => withFilter({ form: 'pd' as const }, filter)),
  fc.constant<Controller>({ form: 'pi' }),
  fc.constant<Controller>({ form: 'rate' }),
)

const threeGainForms: fc.Arbitrary<Controller> = fc.tuple(
  fc.oneof(placeSize.map(s => ({ integralToDerivativeRatio: 4 * s })), placeSize.map(s => ({ pole: -s }))), arbitraryFilter,
).map(([third, filter]) => withFilter({ form: 'pid' as const, third }, filter))

/** Relative distance from the point to the nearest root of the closed loop. */
function missedBy(model: LoopModel, controller: Controller, gains: Gains, point: Complex): number {
  const found = roots(loopFunctions(model, controller, gains).characteristic)
  return Math.min(...found.map(root => distance(root, point))) / Math.hypot(point.re, point.im)
}

/** null where the form has no gains for the point, which must be said by NoAnswerError. */
function placed(model: LoopModel, controller: Controller, point: Complex): { all: Gains[], placement: Placement } | null {
  try {
    const placement = placeGains(model, controller, point)
    const all = [placement.gains, ...placement.alternatives]
    // The loop itself may have no answer: more zeros than poles.
    all.forEach(gains => loopFunctions(model, controller, gains))
    return { all, placement }
  }
  catch (error) {
    expect(error).toBeInstanceOf(NoAnswerError)
    return null
  }
}

describe('a placed point is a root of the closed loop', () => {
  it.each<[string, fc.Arbitrary<Controller>, number]>([
    ['two gains', twoGainForms, 400],
    ['three gains', threeGainForms, 200],
    ['lead', placeSize.map(s => ({ form: 'lead', poleZeroRatio: 1 + 5 * s })), 25],
  ])('%s', (_, controllers, least) => {
    let reached = 0
    holds(8, 600, [arbitraryModel, controllers, arbitraryPoint], (model, controller, point) => {
      const found = placed(model, controller, point)
      if (found === null) return
      expect(found.placement).toMatchObject({ onLocus: true, leftoverAngle: 0 })
      for (const gains of found.all) expect(missedBy(model, controller, gains, point)).toBeLessThan(1e-9)
      reached++
    })
    expect(reached).toBeGreaterThan(least)
  })

  it('every lead has the wanted ratio, a zero in the left half plane and a positive gain, the larger gain first', () => {
    let [pairs, none] = [0, 0]
    holds(9, 300, [arbitraryModel, placeSize, arbitraryPoint], (model, size, point) => {
      const poleZeroRatio = 1 + 5 * size
      const found = placed(model, { form: 'lead', poleZeroRatio }, point)
      if (found === null) none++
      if (found === null) return
      const leads = found.all as { k: number, zero: number, pole: number }[]
      if (leads.length === 2) pairs++
      for (const { k, zero, pole } of leads) {
        expect(pole / zero).toBeCloseTo(poleZeroRatio, 12)
        expect(zero).toBeLessThan(0)
        expect(k).toBeGreaterThan(0)
      }
      expect(leads.every(({ k }, i) => i === 0 || k <= leads[i - 1]!.k)).toBe(true)
    })
    expect(pairs).toBeGreaterThan(10)
    expect(none).toBeGreaterThan(20)
  })
})

describe('a root that gains give is on the locus, and its gains are found again', () => {
  it('one gain, with and without a lag', () => {
    let checked = 0
    holds(10, 300, [arbitraryLoop(2, 5), placeSize, fc.boolean()], (plant, k, withLag) => {
      const model: LoopModel = { plant, rateFeedback: 0 }
      const controller: Controller = withLag ? { form: 'lag', poleZeroRatio: 0.1, zero: -0.05 } : { form: 'gain' }
      const gains = withLag ? { k, zero: -0.05, pole: -0.005 } : { k }
      const point = isolatedRoot(model, controller, gains)
      if (point === null) return
      const { gains: found, onLocus, leftoverAngle } = placeGains(model, controller, point)
      expect(onLocus, `${leftoverAngle}`).toBe(true)
      expect(Math.abs((found as { k: number }).k / k - 1)).toBeLessThan(1e-9)
      checked++
    })
    expect(checked).toBeGreaterThan(150)
  })

  it('three gains, by the ratio of their times and by a third real root', () => {
    const [byRatio, byPole] = [new Set<number>(), new Set<number>()]
    let round = 0
    holds(305, 400, [arbitraryModel, fc.tuple(placeSize, placeSize, placeSize), arbitraryFilter], (model, [kp, ki, kd], filter) => {
      round++
      const gains = { kp, ki, kd }
      const controller = (third: { pole: number } | { integralToDerivativeRatio: number }): Controller => withFilter({ form: 'pid' as const, third }, filter)
      let point: Complex | null
      try {
        point = isolatedRoot(model, controller({ pole: -1 }), gains)
      }
      catch (error) {
        expect(error).toBeInstanceOf(NoAnswerError)
        return
      }
      if (point === null) return
      expect(missedGains(placeGains(model, controller({ integralToDerivativeRatio: kp ** 2 / (ki * kd) }), point), gains)).toBeLessThan(1e-6)
      byRatio.add(round)
      const real = roots(loopFunctions(model, controller({ pole: -1 }), gains).characteristic).find(root => root.im === 0 && root.re < -0.05)
      // A pole that a zero of the plant takes away stays a root at any gains: as a third root it says nothing.
      if (!real || roots(model.plant.numerator).some(zero => distance(zero, real) < 1e-6)) return
      expect(missedGains(placeGains(model, controller({ pole: real.re }), point), gains)).toBeLessThan(1e-6)
      byPole.add(round)
    })
    expect(byRatio.size).toBeGreaterThan(150)
    expect(byPole.size).toBeGreaterThan(100)
  })
})

/** A root well above the real axis and well apart from the others: a place that rounding hardly moves. */
function isolatedRoot(model: LoopModel, controller: Controller, gains: Gains): Complex | null {
  const found = roots(loopFunctions(model, controller, gains).characteristic)
  const size = (s: Complex) => Math.hypot(s.re, s.im)
  return found.find(root => root.im > 0.1 * size(root) && found.every(other => other === root || distance(root, other) > 0.05 * size(root))) ?? null
}

function missedGains({ gains, alternatives }: Placement, wanted: Record<string, number>): number {
  const missed = (found: Record<string, number>) => Math.max(...Object.keys(wanted).map(name => Math.abs(found[name]! / wanted[name]! - 1)))
  return Math.min(...[gains, ...alternatives].map(each => missed(each as unknown as Record<string, number>)))
}
