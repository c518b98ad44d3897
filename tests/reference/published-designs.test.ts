import { describe, expect, it } from 'vitest'
import { roots } from '#shared/numerics/roots'
import { respond } from '#shared/control/response/response'
import { stationaryError } from '#shared/control/response/steady-state'
import { firstReaching } from '#shared/control/response/trajectory'
import { pointFromDamping } from '#shared/control/design-point'
import { solveDesign } from '#shared/control/solve'
import { closedLoopOf, evaluateLoop, loopOf, product } from '../helpers/loops'
import { expectClose, publishedCase } from '../helpers/published'

describe('published designs', () => {
  const b05 = publishedCase('B05')
  it(b05.title, () => {
    const loop = loopOf([1, 1.5], product([1, 0], [1, 1], [1, 10]))
    const places = b05.exact('s')
    const solutions = [0, 1, 2].map(i => solveDesign(loop, { form: 'gain' }, { designPoint: { re: places[2 * i]!, im: places[2 * i + 1]! } }))
    b05.holds('K', solutions.map(({ gains }) => (gains as { k: number }).k))
    b05.holds('third_pole', solutions.map(({ closedLoopPoles }) => closedLoopPoles.find(pole => pole.im === 0)!.re))
    b05.holds('Ts_est', solutions.map(({ estimate }) => estimate.settlingTime))
    b05.holds('Tp_est', solutions.map(({ estimate }) => estimate.peakTime))
    b05.holds('Kv', solutions.map(({ readings }) => 1 / readings.steadyStateErrorRamp!))
    b05.holds('exact_PO_percent', solutions.map(({ readings }) => readings.overshootPercent))
    b05.holds('exact_tp', solutions.map(({ readings }) => readings.peakTime))
    b05.holds('exact_ts2', solutions.map(({ readings }) => readings.settlingTime))
    solutions.forEach(({ onLocus, estimate }) => {
      expect(onLocus).toBe(true)
      expect(estimate.overshootPercent).toBeCloseTo(1.516461986454656, 9)
    })
  })

  const b08 = publishedCase('B08')
  it(b08.title, () => {
    const loop = loopOf([1], product([1, 0], [1, 4], [1, 6]))
    const poles = b08.exact('pc')
    const [re, im] = b08.exact('sd')
    const solutions = b08.inputs('zeros').map((zero, i) =>
      solveDesign(loop, { form: 'gain', shape: { numerator: [1, -zero], denominator: [1, poles[i]!] } }, { designPoint: { re: re!, im: im! } }))
    b08.holds('K', solutions.map(({ gains }) => (gains as { k: number }).k))
    b08.holds('Kv', solutions.map(({ readings }) => 1 / readings.steadyStateErrorRamp!))
    b08.holds('exact_PO_percent', solutions.map(({ readings }) => readings.overshootPercent))
  })

  const b14 = publishedCase('B14')
  it(b14.title, () => {
    const plant = loopOf([1], [1, 1, 0])
    const first = solveDesign(plant, { form: 'gain', shape: { numerator: [1, 2], denominator: [1, 10] } }, { gains: { k: 70 } })
    b14.holds('exact_PO_K70', first.readings.overshootPercent)
    const zero = b14.exact('zero')[0]!
    const second = solveDesign(plant, { form: 'gain', shape: { numerator: [1, zero], denominator: [1, 20] } }, {
      designPoint: { re: -3.5, im: 3.5 * Math.sqrt(3) },
    })
    b14.holds('K', (second.gains as { k: number }).k)
    // The recomputed overshoot belongs to the zero as printed, -5.4.
    const printed = solveDesign(plant, { form: 'gain', shape: { numerator: [1, 5.4], denominator: [1, 20] } }, { gains: { k: 127 } })
    b14.holds('exact_PO_K127', printed.readings.overshootPercent)
    expect(Math.abs(second.readings.overshootPercent! - printed.readings.overshootPercent!)).toBeLessThan(0.01)
    // The whole loop overshoots twice as far as its pole pair alone would.
    expectClose(second.estimate.overshootPercent, 16.303353482158048, 1e-9, 'estimate')
  })

  const c01 = publishedCase('C01')
  it(c01.title, () => {
    const orders = [2, 3, 4, 5, 6, 7, 8]
    const table = c01.inputs('table')
    const solutions = orders.map((order) => {
      const from = orders.filter(other => other < order).reduce((sum, other) => sum + other - 1, 0)
      return closedLoopOf([1], [1, ...table.slice(from, from + order - 1), 1])
    })
    expect(solutions.every(({ stable }) => stable)).toBe(true)
    c01.holds('PO_table', solutions.map(({ readings }) => readings.overshootPercent))
    c01.holds('ts2_table', solutions.map(({ readings }) => readings.settlingTime))
    c01.holds('order2_PO', solutions[0]!.readings.overshootPercent)
  })

  const c03 = publishedCase('C03')
  it(c03.title, () => {
    const settling = (settlingBandPercent: number) => [1, 2, 3, 4].map(n =>
      closedLoopOf([1], product(...new Array<number[]>(n).fill([1, 1])), { response: { settlingBandPercent } }).readings.settlingTime)
    c03.holds('binomial_ts2', settling(2))
    c03.holds('binomial_ts5', settling(5))
  })

  const c06 = publishedCase('C06')
  it(c06.title, () => {
    const figures = (loop: { numerator: number[], denominator: number[] }) => {
      const { readings } = evaluateLoop(loop)
      const denominator = loop.denominator.map((c, i) => c + (loop.numerator[i - loop.denominator.length + loop.numerator.length] ?? 0))
      const step = respond({ numerator: loop.numerator, denominator }, roots(denominator), 1)
      return { readings, three: [readings.overshootPercent, firstReaching(step, 1, 0), readings.settlingTime] }
    }
    const magnitude = figures({ numerator: [1], denominator: [2, 2, 0] })
    c06.holds('MO', magnitude.three)
    c06.holds('MO_PM_deg', magnitude.readings.phaseMarginDeg)
    const symmetrical = figures({ numerator: [4, 1], denominator: [8, 8, 0, 0] })
    c06.holds('SO', symmetrical.three)
    c06.holds('SO_PM_deg', symmetrical.readings.phaseMarginDeg)
    // The filter 1/(4s + 1) takes the closed loop's zero away: T = 1/(8s^3 + 8s^2 + 4s + 1).
    c06.holds('SO_filtered', figures({ numerator: [1], denominator: [8, 8, 4, 0] }).three)
  })

  const e02 = publishedCase('E02')
  it(e02.title, () => {
    const plant = loopOf([1], product([1, 0], [1, 1], [1, 5]))
    const { readings } = solveDesign(plant, { form: 'gain' }, { gains: { k: 1 } })
    e02.holds('Kcr', readings.gainMargin.upper)
    e02.holds('Pcr', 2 * Math.PI / readings.phaseCrossover!)
    const ultimate = { gain: readings.gainMargin.upper!, period: 2 * Math.PI / readings.phaseCrossover! }
    e02.holds('Kp', 0.6 * ultimate.gain)
    e02.holds('Ti', ultimate.period / 2)
    e02.holds('Td', ultimate.period / 8)
    // Kp (1 + 1/(Ti s) + Td s) at the settings as printed, for which the figures were recomputed: the rule's, then the book's two retunings.
    const settings = [{ Kp: 18, Ti: 1.405, Td: 0.35124 }, { Kp: 18, Ti: 3.077, Td: 0.7692 }, { Kp: 39.42, Ti: 3.077, Td: 0.7692 }]
    const solutions = settings.map(({ Kp, Ti, Td }) =>
      solveDesign(plant, { form: 'pid', third: { integralToDerivativeRatio: Ti / Td } }, { gains: { kp: Kp, ki: Kp / Ti, kd: Kp * Td } }).readings)
    e02.holds('PO_percent', solutions.map(one => one.overshootPercent))
    e02.holds('ts2', solutions.map(one => one.settlingTime))
  })

  const f01 = publishedCase('F01')
  it(f01.title, () => {
    const poles = product([1, 8], [1, 10], [1, 12])
    const type0 = evaluateLoop({ numerator: product([500], [1, 2], [1, 5]), denominator: poles }).readings
    f01.holds('Kp', 1 / type0.steadyStateErrorStep! - 1)
    expect(type0.steadyStateErrorRamp).toBeNull()
    const type1 = evaluateLoop({ numerator: product([500], [1, 2], [1, 5], [1, 6]), denominator: product([1, 0], poles) }).readings
    expect(type1.steadyStateErrorStep).toBe(0)
    f01.holds('Kv', 1 / type1.steadyStateErrorRamp!)
    const type2 = { numerator: product([500], [1, 2], [1, 4], [1, 5], [1, 6], [1, 7]), denominator: product([1, 0, 0], poles) }
    expect(evaluateLoop(type2).readings.steadyStateErrorRamp).toBe(0)
    const characteristic = type2.denominator.map((c, i) => c + type2.numerator[i]!)
    f01.holds('Ka', 1 / stationaryError({ numerator: type2.denominator, denominator: characteristic }, 3)!)
    const wanted = loopOf([1, 5], product([1, 0], [1, 6], [1, 7], [1, 8]))
    const unit = solveDesign(wanted, { form: 'gain' }, { gains: { k: 1 } })
    const k = unit.readings.steadyStateErrorRamp! / 0.1
    f01.holds('K_10pct_ramp', k)
    const ramp = solveDesign(wanted, { form: 'gain' }, { gains: { k } })
    expectClose(ramp.readings.steadyStateErrorRamp, 0.1, 1e-12, 'ramp error')
  })

  const f04 = publishedCase('F04')
  it(f04.title, () => {
    const plant = loopOf([8], [1, 2, 0])
    const before = solveDesign(plant, { form: 'gain' }, { gains: { k: 1 } })
    f04.holds('ess0', before.readings.steadyStateErrorRamp)
    f04.holds('wn', before.designPoint.naturalFrequency)
    f04.holds('zeta0', before.designPoint.dampingRatio)
    const after = solveDesign(plant, { form: 'rate' }, { designPoint: pointFromDamping(0.7, Math.sqrt(8)) })
    const { kp, kr } = after.gains as { kp: number, kr: number }
    expectClose(kp, 1, 1e-12, 'kp')
    f04.holds('a', kr)
    f04.holds('ess1', after.readings.steadyStateErrorRamp)
    // The same inner feedback as part of the loop.
    const inner = solveDesign({ ...plant, rateFeedback: kr }, { form: 'gain' }, { gains: { k: 1 } })
    f04.holds('ess1', inner.readings.steadyStateErrorRamp)
    expectClose(inner.designPoint.dampingRatio, 0.7, 1e-12, 'damping ratio')
  })
})
