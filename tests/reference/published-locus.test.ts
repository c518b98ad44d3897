/**
 * Worked examples of the literature about gains and roots. Every case of tests/fixtures/published.json names its source and says where its printed
 * figures come from; both stand in the test's title. The product is held tightly to `exact` (the same problem recomputed in high precision);
 * `published` shows that the problem is the one in the book, within the accuracy it was printed to.
 */
import { describe, expect, it } from 'vitest'
import { analyzeLoop } from '#shared/control/analyze'
import { loopFunctions } from '#shared/control/controller'
import { placeGains } from '#shared/control/placement'
import type { Controller, Gains, LoopModel, TransferFunction } from '#shared/control/types'
import type { Complex } from '#shared/numerics/complex'
import { fromRoots } from '#shared/numerics/polynomial'
import { roots } from '#shared/numerics/roots'
import { expectClose, publishedCase } from '../helpers/published'

const real = (...places: number[]): Complex[] => places.map(re => ({ re, im: 0 }))
const plant = (numerator: number[], denominator: number[]): LoopModel => ({ plant: { numerator, denominator }, rateFeedback: 0 })
const shaped = (numerator: number[], denominator: number[]): Controller => ({ form: 'gain', shape: { numerator, denominator } })
const pair = ({ re, im }: Complex): [number, number] => [re, im]
const gainAt = (model: LoopModel, controller: Controller, point: Complex) => placeGains(model, controller, point).gains as { k: number }
const degrees = (radians: number) => radians * 180 / Math.PI
const dampingForOvershoot = (percent: number) => {
  const logarithm = Math.log(percent / 100)
  return -logarithm / Math.hypot(Math.PI, logarithm)
}

/** Closed-loop roots at a gain, without the pair of the design. */
function realRootsAt(model: LoopModel, controller: Controller, gains: Gains): number[] {
  return roots(loopFunctions(model, controller, gains).characteristic).filter(root => root.im === 0).map(root => root.re)
}

const relativeTolerance = 1e-10

type Figures = Record<string, number | readonly (number | readonly number[])[]>

/** Every figure tightly against the recomputed one of its name, and against the printed one where there is one. */
function holdAll(c: ReturnType<typeof publishedCase>, figures: Figures, relative = relativeTolerance): void {
  for (const [name, figure] of Object.entries(figures)) c.holds(name, [figure].flat(2) as number[], relative)
}

function titled(id: string): string {
  return publishedCase(id).title
}

describe(titled('B01'), () => {
  const c = publishedCase('B01')
  const analysis = analyzeLoop(plant([1], fromRoots(real(0, -1, -2))), { form: 'gain' }, { dampingRatio: 0.5 })
  const [meeting] = analysis.rayIntersections!
  const figures = {
    centroid: analysis.asymptotes!.centroid,
    asymptote_deg: analysis.asymptotes!.anglesDeg,
    breakaway: analysis.breakaways[0]!.point.re,
    jw_omega: analysis.imaginaryAxisCrossings[0]!.frequency,
    jw_K: analysis.imaginaryAxisCrossings[0]!.gain,
    zeta05_s: pair(meeting!.point),
    zeta05_K: meeting!.gain,
    third_pole: realRootsAt(plant([1], fromRoots(real(0, -1, -2))), { form: 'gain' }, { k: meeting!.gain })[0]!,
  }

  it('asymptotes, breakaway, crossing, gain on the ray', () => {
    expect(analysis.rayIntersections).toHaveLength(1)
    expect(analysis.breakaways).toHaveLength(1)
    expect(analysis.stableGain).toEqual([[0, analysis.imaginaryAxisCrossings[0]!.gain]])
    holdAll(c, figures)
  })
})

describe(titled('B02'), () => {
  const c = publishedCase('B02')

  it('departure angles and a break-in point', () => {
    const first = analyzeLoop(plant([1, 2], [1, 2, 3]), { form: 'gain' })
    const second = analyzeLoop(plant([1, 2], [1, 5, 8, 6]), { form: 'gain' })
    const upper = (analysis: typeof first) => analysis.departures.find(({ pole }) => pole.im > 0)!.angleDeg
    const figures = {
      dep1_deg: upper(first), breakin1: first.breakaways[0]!.point.re, K_breakin1: first.breakaways[0]!.gain, dep2_deg: upper(second),
    }
    holdAll(c, figures)
  })
})

describe(titled('B03'), () => {
  const c = publishedCase('B03')

  it('asymptotes and crossing', () => {
    const analysis = analyzeLoop(plant([1, 3], fromRoots(real(0, -1, -2, -4))), { form: 'gain' })
    const figures = {
      centroid: analysis.asymptotes!.centroid,
      asymptote_deg: analysis.asymptotes!.anglesDeg,
      jw_K: analysis.imaginaryAxisCrossings[0]!.gain,
      jw_omega: analysis.imaginaryAxisCrossings[0]!.frequency,
    }
    expect(analysis.imaginaryAxisCrossings).toHaveLength(1)
    holdAll(c, figures)
  })
})

describe(titled('B05'), () => {
  const c = publishedCase('B05')
  const model = plant([1, 1.5], fromRoots(real(0, -1, -10)))

  it('the ray meets the locus three times, all listed', () => {
    const meetings = analyzeLoop(model, { form: 'gain' }, { dampingRatio: 0.8 }).rayIntersections!
    const figures = {
      K: meetings.map(({ gain }) => gain),
      s: meetings.map(({ point }) => pair(point)),
      third_pole: meetings.map(({ gain }) => realRootsAt(model, { form: 'gain' }, { k: gain })[0]!),
    }
    holdAll(c, figures)
  })
})

describe(titled('B06'), () => {
  const c = publishedCase('B06')
  const model = plant([1], fromRoots(real(-1, -2, -10)))
  const farthest = (controller: Controller) => analyzeLoop(model, controller, { dampingRatio: 0.174 }).rayIntersections!.at(-1)!

  it('gains on the ray without, with PI and with lag', () => {
    const plain = farthest({ form: 'gain' })
    const figures = {
      K: plain.gain,
      s: pair(plain.point),
      third: realRootsAt(model, { form: 'gain' }, { k: plain.gain })[0]!,
      K_PI: farthest(shaped([1, 0.1], [1, 0])).gain,
      K_lag: farthest(shaped([1, 0.111], [1, 0.01])).gain,
    }
    holdAll(c, figures)
  })
})

describe(titled('B07'), () => {
  const c = publishedCase('B07')
  const model = plant([1], fromRoots(real(0, -4, -6)))

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
  const model = plant([1], fromRoots(real(0, -4, -6)))
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
  const model = plant([10], fromRoots(real(0, -1)))
  const point = { re: -1.5, im: 1.5 * Math.sqrt(3) }

  it('angle deficiency, bisector lead, pole-cancelling lead', () => {
    const lead = placeGains(model, { form: 'lead', poleZeroRatio: c.exact('pole')[0]! / c.exact('zero')[0]! }, point)
    const bisector = lead.gains as { k: number, zero: number, pole: number }
    const figures = {
      deficiency_deg: -degrees(placeGains(model, { form: 'gain' }, point).leftoverAngle),
      Kc: gainAt(model, shaped([1, c.exact('zero')[0]!], [1, c.exact('pole')[0]!]), point).k,
      Kc_method2: gainAt(model, shaped([1, 1], [1, 3]), point).k,
    }
    holdAll(c, figures)
    // The bisector is the lead of least ratio: two zeros fall together there, so the last digits of the ratio move the zero by their root.
    expect(lead.alternatives).toEqual([])
    holdAll(c, { zero: -bisector.zero, pole: -bisector.pole, Kc: bisector.k }, 1e-7)
  })
})

describe(titled('B10'), () => {
  const c = publishedCase('B10')
  const model = plant([1.06], fromRoots(real(0, -1, -2)))

  it('roots without, gain with the lag at the new point', () => {
    const before = roots(loopFunctions(model, { form: 'gain' }, { k: 1 }).characteristic)
    const figures = {
      s0: pair(before.find(root => root.im > 0)!),
      third0: before.find(root => root.im === 0)!.re,
      Kc: gainAt(model, shaped([1, 0.05], [1, 0.005]), { re: -0.31, im: 0.55 }).k,
    }
    holdAll(c, figures)
  })
})

describe(titled('B13'), () => {
  const c = publishedCase('B13')
  const model = plant([1, 4], [1, 0.1, 4, 0])
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
  const model = plant([1], fromRoots(real(0, -1)))
  const point = { re: -3.5, im: 3.5 * Math.sqrt(3) }

  it('lead with its pole at -20, and the first design on the same ray', () => {
    const lead = placeGains(model, { form: 'lead', poleZeroRatio: 20 / c.exact('zero')[0]! }, point)
    const { k, zero, pole } = [lead.gains, ...lead.alternatives].map(each => each as { k: number, zero: number, pole: number })
      .find(each => Math.abs(each.pole + 20) < 1e-6)!
    expect(pole).toBeCloseTo(-20, 9)
    holdAll(c, { zero: -zero, K: k })

    const first = shaped([1, 2], [1, 10])
    const found = roots(loopFunctions(model, first, { k: 70 }).characteristic)
    holdAll(c, { roots_at_K70: found.map(pair).sort((a, b) => b[0] - a[0] || a[1] - b[1]) })
    const meetings = analyzeLoop(model, first, { dampingRatio: 0.5 }).rayIntersections!
    holdAll(c, { K_zeta05_first: meetings.at(-1)!.gain })
  })
})

describe(titled('B16'), () => {
  const c = publishedCase('B16')
  const model = plant([1], [1, 12, 64, 128, 0])

  it('asymptotes, breakaway, crossing, departure, gain on the ray', () => {
    const analysis = analyzeLoop(model, { form: 'gain' }, { dampingRatio: Math.SQRT1_2 })
    const [meeting] = analysis.rayIntersections!
    const figures = {
      centroid: analysis.asymptotes!.centroid,
      jw_K: analysis.imaginaryAxisCrossings[0]!.gain,
      jw_omega: analysis.imaginaryAxisCrossings[0]!.frequency,
      breakaway: analysis.breakaways[0]!.point.re,
      dep_deg: analysis.departures.find(({ pole }) => pole.im > 0)!.angleDeg,
      K_zeta0707: meeting!.gain,
      s_zeta0707: pair(meeting!.point),
    }
    holdAll(c, figures)
  })
})

describe(titled('A02'), () => {
  const c = publishedCase('A02')

  it('position and rate gain of the servo', () => {
    const [zeta = NaN] = c.exact('zeta')
    const [wn = NaN] = c.exact('wn')
    const point = { re: -zeta * wn, im: wn * Math.sqrt(1 - zeta ** 2) }
    const { kp, kr } = placeGains(plant([1], [1, 1, 0]), { form: 'rate' }, point).gains as { kp: number, kr: number }
    holdAll(c, { K: kp, Kh: kr / kp })
  })
})

describe(titled('F04'), () => {
  const c = publishedCase('F04')

  it('derivative feedback for damping ratio 0.7', () => {
    const wn = Math.sqrt(8)
    const point = { re: -0.7 * wn, im: wn * Math.sqrt(1 - 0.49) }
    const { kp, kr } = placeGains(plant([8], [1, 2, 0]), { form: 'rate' }, point).gains as { kp: number, kr: number }
    expect(kp).toBeCloseTo(1, 13)
    holdAll(c, { a: kr })
  })
})

describe(titled('E02'), () => {
  const c = publishedCase('E02')

  it('ultimate gain and period', () => {
    const [crossing] = analyzeLoop(plant([1], fromRoots(real(0, -1, -5))), { form: 'gain' }).imaginaryAxisCrossings
    const figures = { Kcr: crossing!.gain, Pcr: 2 * Math.PI / crossing!.frequency }
    holdAll(c, figures)
  })
})

describe(titled('C06'), () => {
  const symmetrical = plant([4, 1], [8, 8, 0, 0])

  it('the symmetrical optimum touches the ray of damping ratio 0.5 at its own gain, and meets that of 0.4 twice (figures from mpmath)', () => {
    const touching = analyzeLoop(symmetrical, { form: 'gain' }, { dampingRatio: 0.5 }).rayIntersections!
    expect(touching).toHaveLength(1)
    expectClose(touching[0]!.gain, 1, 1e-13, 'gain')
    expectClose(touching[0]!.point.re, -0.25, 1e-7, 'real part')
    const meetings = analyzeLoop(symmetrical, { form: 'gain' }, { dampingRatio: 0.4 }).rayIntersections!
    expect(meetings).toHaveLength(2)
    expectClose(meetings[0]!.gain, 0.540098550228934, 1e-13, 'first gain')
    expectClose(meetings[1]!.gain, 1.85151394977107, 1e-13, 'second gain')
  })
})

describe(titled('C02'), () => {
  const c = publishedCase('C02')
  const upper = (coefficients: number[]) => roots(coefficients).filter(root => root.im >= 0).map(pair)
  /** The variable scaled to a unit product of roots. */
  const unitProduct = (coefficients: number[]) => {
    const n = coefficients.length - 1
    const size = coefficients[n]! ** (1 / n)
    return coefficients.map((coefficient, i) => coefficient / size ** i)
  }

  it('roots of the ITAE and Bessel prototypes', () => {
    const figures = {
      ITAE3: upper([1, 1.75, 2.15, 1]),
      ITAE4: upper([1, 2.1, 3.4, 2.7, 1]),
      Bessel3: upper(unitProduct([1, 6, 15, 15])),
      Bessel4: upper(unitProduct([1, 10, 45, 105, 105])),
    }
    holdAll(c, figures)
  })
})
