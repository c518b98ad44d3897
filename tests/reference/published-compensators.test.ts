/**
 * Worked examples of the literature about the gains of compensators.
 * The product is held tightly to `exact`, the same problem recomputed in high precision; `published` shows that the problem is the one in the book,
 * within the accuracy it was printed to. Source and provenance stand in the title of each test.
 */
import { describe, expect, it } from 'vitest'
import { analyzeLoop } from '#shared/control/analyze'
import { loopFunctions } from '#shared/control/controller'
import { placeGains } from '#shared/control/placement'
import type { Controller, LoopModel, TransferFunction } from '#shared/control/types'
import type { Complex } from '#shared/numerics/complex'
import { fromRoots } from '#shared/numerics/polynomial'
import { roots } from '#shared/numerics/roots'
import { solveDesign } from '#shared/control/solve'
import { loopOf, pair, product, real, realRootsAt, shaped } from '../helpers/loops'
import { expectClose, holdAll, publishedCase, titled } from '../helpers/published'

const gainAt = (model: LoopModel, controller: Controller, point: Complex) => placeGains(model, controller, point).gains as { k: number }
/** Kv, by the ramp error of the whole loop. */
const velocityConstant = (model: LoopModel, controller: Controller, designPoint: Complex) =>
  1 / solveDesign(model, controller, { designPoint }).readings.steadyStateErrorRamp!
const degrees = (radians: number) => radians * 180 / Math.PI
const dampingForOvershoot = (percent: number) => {
  const logarithm = Math.log(percent / 100)
  return -logarithm / Math.hypot(Math.PI, logarithm)
}

describe(titled('B06'), () => {
  const c = publishedCase('B06')
  const model = loopOf([1], fromRoots(real(-1, -2, -10)))
  const farthest = (controller: Controller) => analyzeLoop(model, controller, { dampingRatio: 0.174 }).rayIntersections!.at(-1)!

  it('gains on the ray without, with PI and with lag', () => {
    const plain = farthest({ form: 'gain' })
    const figures = {
      K: plain.gain,
      s: pair(plain.point),
      third: realRootsAt(model, { form: 'gain' }, { k: plain.gain })[0]!,
      e_step: solveDesign(model, { form: 'gain' }, { gains: { k: plain.gain } }).readings.steadyStateErrorStep!,
      K_PI: farthest(shaped([1, 0.1], [1, 0])).gain,
      K_lag: farthest({ form: 'lag', zero: -0.111, poleZeroRatio: 0.01 / 0.111 }).gain,
    }
    holdAll(c, figures)
  })
})

describe(titled('B07'), () => {
  const c = publishedCase('B07')
  const model = loopOf([1], fromRoots(real(0, -4, -6)))

  it('the PD zero that makes settling three times shorter', () => {
    const zeta = dampingForOvershoot(16)
    const [first] = analyzeLoop(model, { form: 'gain' }, { dampingRatio: zeta }).rayIntersections!
    const faster = { re: 3 * first!.point.re, im: 3 * first!.point.im }
    const { kp, kd } = placeGains(model, { form: 'pd' }, faster).gains as { kp: number, kd: number }
    const { leftoverAngle } = placeGains(model, { form: 'gain' }, faster)
    const figures = {
      zeta, K0: first!.gain, s0: pair(first!.point), third0: realRootsAt(model, { form: 'gain' }, { k: first!.gain })[0]!,
      sd: pair(faster), zero_angle_deg: -degrees(leftoverAngle), zc: kp / kd, K: kd,
    }
    holdAll(c, figures)
  })
})

describe(titled('B08'), () => {
  const c = publishedCase('B08')
  const model = loopOf([1], fromRoots(real(0, -4, -6)))
  const zeros = [-5, -4, -2]

  it('three leads that halve the settling time', () => {
    const [first] = analyzeLoop(model, { form: 'gain' }, { dampingRatio: dampingForOvershoot(30) }).rayIntersections!
    const point = { re: 2 * first!.point.re, im: 2 * first!.point.im }
    const poles = c.exact('pc')
    const leads = zeros.map((zero, i) => {
      const { gains, alternatives } = placeGains(model, { form: 'lead', poleZeroRatio: poles[i]! / -zero }, point)
      return [gains, ...alternatives].map(each => each as { k: number, zero: number, pole: number })
        .reduce((best, each) => Math.abs(each.zero - zero) < Math.abs(best.zero - zero) ? each : best)
    })
    leads.forEach((lead, i) => expect(Math.abs(lead.zero / zeros[i]! - 1)).toBeLessThan(1e-9))
    const figures = { K0: first!.gain, s0: pair(first!.point), sd: pair(point), pc: leads.map(lead => -lead.pole), K: leads.map(lead => lead.k) }
    holdAll(c, figures)
  })
})

describe(titled('B09'), () => {
  const c = publishedCase('B09')
  const model = loopOf([10], fromRoots(real(0, -1)))
  const point = { re: -1.5, im: 1.5 * Math.sqrt(3) }

  it('angle deficiency, bisector lead, pole-cancelling lead', () => {
    const lead = placeGains(model, { form: 'lead', poleZeroRatio: c.exact('pole')[0]! / c.exact('zero')[0]! }, point)
    const bisector = lead.gains as { k: number, zero: number, pole: number }
    const figures = {
      deficiency_deg: -degrees(placeGains(model, { form: 'gain' }, point).leftoverAngle),
      Kc: gainAt(model, shaped([1, c.exact('zero')[0]!], [1, c.exact('pole')[0]!]), point).k,
      Kc_method2: gainAt(model, shaped([1, 1], [1, 3]), point).k,
      Kv_method2: velocityConstant(model, shaped([1, 1], [1, 3]), point),
    }
    holdAll(c, figures)
    // The bisector is the lead of least ratio: two zeros fall together there, so the last digits of the ratio move the zero by their root.
    expect(lead.alternatives).toEqual([])
    const Kv = velocityConstant(model, shaped([1, c.exact('zero')[0]!], [1, c.exact('pole')[0]!]), point)
    holdAll(c, { zero: -bisector.zero, pole: -bisector.pole, Kc: bisector.k, Kv }, 1e-7)
  })
})

describe(titled('B10'), () => {
  const c = publishedCase('B10')
  const model = loopOf([1.06], fromRoots(real(0, -1, -2)))

  it('roots without, gain with the lag at the new point', () => {
    const before = roots(loopFunctions(model, { form: 'gain' }, { k: 1 }).characteristic)
    const figures = {
      s0: pair(before.find(root => root.im > 0)!),
      third0: before.find(root => root.im === 0)!.re,
      Kc: gainAt(model, { form: 'lag', zero: -0.05, poleZeroRatio: 0.1 }, { re: -0.31, im: 0.55 }).k,
      Kv0: 1 / solveDesign(model, { form: 'gain' }, { gains: { k: 1 } }).readings.steadyStateErrorRamp!,
      Kv: velocityConstant(model, { form: 'lag', zero: -0.05, poleZeroRatio: 0.1 }, { re: -0.31, im: 0.55 }),
    }
    holdAll(c, figures)
  })
})

describe(titled('B13'), () => {
  const c = publishedCase('B13')
  const model = loopOf([1, 4], [1, 0.1, 4, 0])
  const point = { re: -2, im: 2 * Math.sqrt(3) }

  it('an angle that takes two equal leads', () => {
    const [pole = NaN] = c.exact('pole')
    const bare = placeGains(model, { form: 'gain' }, point)
    const twice: TransferFunction = { numerator: [1, 4, 4], denominator: fromRoots(real(-pole, -pole)) }
    const compensated = placeGains(model, { form: 'gain', shape: twice }, point)
    const figures = {
      plant_angles_sum_deg: degrees(bare.leftoverAngle),
      each_deg: -degrees(bare.leftoverAngle) / 2,
      Kc: (compensated.gains as { k: number }).k,
    }
    holdAll(c, figures)
    expect(compensated.onLocus).toBe(true)
    // Either lead is the one that the other leaves to be found.
    const withOne = loopOf(product([1, 4], [1, 2]), product([1, 0.1, 4, 0], [1, pole]))
    const { gains, alternatives } = placeGains(withOne, { form: 'lead', poleZeroRatio: pole / 2 }, point)
    const second = [gains, ...alternatives].map(each => each as { zero: number, pole: number }).find(each => Math.abs(each.zero + 2) < 1e-6)!
    holdAll(c, { pole: -second.pole }, 1e-9)
  })

  it('the compensated loop meets the ray of damping ratio 0.5 twice (second meeting and a rejected one with negative gain from mpmath)', () => {
    const [pole = NaN] = c.exact('pole')
    const meetings = analyzeLoop(model, shaped([1, 4, 4], [1, 2 * pole, pole * pole]), { dampingRatio: 0.5 }).rayIntersections!
    expect(meetings).toHaveLength(2)
    expectClose(meetings[0]!.gain, 88.0251465931095, 1e-13, 'first gain')
    expectClose(meetings[1]!.gain, 172.454867622682, 1e-13, 'second gain')
    expectClose(meetings[1]!.point.re, -6.38489183796577, 1e-13, 'second real part')
    expectClose(meetings[1]!.point.im, 11.0589570641885, 1e-13, 'second imaginary part')
  })
})

describe(titled('B14'), () => {
  const c = publishedCase('B14')
  const model = loopOf([1], fromRoots(real(0, -1)))
  const point = { re: -3.5, im: 3.5 * Math.sqrt(3) }

  it('lead with its pole at -20, and the first design on the same ray', () => {
    const lead = placeGains(model, { form: 'lead', poleZeroRatio: 20 / c.exact('zero')[0]! }, point)
    const { k, zero, pole } = [lead.gains, ...lead.alternatives].map(each => each as { k: number, zero: number, pole: number })
      .find(each => Math.abs(each.pole + 20) < 1e-6)!
    expect(pole).toBeCloseTo(-20, 9)
    // What the pole at -20 leaves for the zero to give.
    const psi_deg = -degrees(placeGains(model, shaped([1], [1, 20]), point).leftoverAngle)
    holdAll(c, { zero: -zero, K: k, psi_deg })

    const first = shaped([1, 2], [1, 10])
    const found = roots(loopFunctions(model, first, { k: 70 }).characteristic)
    holdAll(c, { roots_at_K70: found.map(pair).sort((a, b) => b[0] - a[0] || a[1] - b[1]) })
    const meetings = analyzeLoop(model, first, { dampingRatio: 0.5 }).rayIntersections!
    holdAll(c, { K_zeta05_first: meetings.at(-1)!.gain })
  })
})

describe(titled('A02'), () => {
  const c = publishedCase('A02')

  it('position and rate gain of the servo', () => {
    const [zeta = NaN] = c.exact('zeta')
    const [wn = NaN] = c.exact('wn')
    const point = { re: -zeta * wn, im: wn * Math.sqrt(1 - zeta ** 2) }
    const { kp, kr } = placeGains(loopOf([1], [1, 1, 0]), { form: 'rate' }, point).gains as { kp: number, kr: number }
    holdAll(c, { K: kp, Kh: kr / kp })
  })
})

describe(titled('F04'), () => {
  const c = publishedCase('F04')

  it('derivative feedback for damping ratio 0.7', () => {
    const wn = Math.sqrt(8)
    const point = { re: -0.7 * wn, im: wn * Math.sqrt(1 - 0.49) }
    const { kp, kr } = placeGains(loopOf([8], [1, 2, 0]), { form: 'rate' }, point).gains as { kp: number, kr: number }
    expect(kp).toBeCloseTo(1, 13)
    holdAll(c, { a: kr })
  })
})
