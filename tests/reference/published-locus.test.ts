/**
 * Worked examples of the literature about loci and roots.
 * The product is held tightly to `exact`, the same problem recomputed in high precision; `published` shows that the problem is the one in the book,
 * within the accuracy it was printed to. Source and provenance stand in the title of each test.
 */
import { describe, expect, it } from 'vitest'
import { analyzeLoop } from '#shared/control/analyze'
import { fromRoots } from '#shared/numerics/polynomial'
import { roots } from '#shared/numerics/roots'
import { loopOf, pair, real, realRootsAt } from '../helpers/loops'
import { expectClose, holdAll, publishedCase, titled } from '../helpers/published'

describe(titled('B01'), () => {
  const c = publishedCase('B01')
  const analysis = analyzeLoop(loopOf([1], fromRoots(real(0, -1, -2))), { form: 'gain' }, { dampingRatio: 0.5 })
  const [meeting] = analysis.rayIntersections!
  const figures = {
    centroid: analysis.asymptotes!.centroid,
    asymptote_deg: analysis.asymptotes!.anglesDeg,
    breakaway: analysis.breakaways[0]!.point.re,
    jw_omega: analysis.imaginaryAxisCrossings[0]!.frequency,
    jw_K: analysis.imaginaryAxisCrossings[0]!.gain,
    zeta05_s: pair(meeting!.point),
    zeta05_K: meeting!.gain,
    third_pole: realRootsAt(loopOf([1], fromRoots(real(0, -1, -2))), { form: 'gain' }, { k: meeting!.gain })[0]!,
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
    const first = analyzeLoop(loopOf([1, 2], [1, 2, 3]), { form: 'gain' })
    const second = analyzeLoop(loopOf([1, 2], [1, 5, 8, 6]), { form: 'gain' })
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
    const analysis = analyzeLoop(loopOf([1, 3], fromRoots(real(0, -1, -2, -4))), { form: 'gain' })
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
  const model = loopOf([1, 1.5], fromRoots(real(0, -1, -10)))

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

describe(titled('B16'), () => {
  const c = publishedCase('B16')
  const model = loopOf([1], [1, 12, 64, 128, 0])

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

describe(titled('E02'), () => {
  const c = publishedCase('E02')

  it('ultimate gain and period', () => {
    const [crossing] = analyzeLoop(loopOf([1], fromRoots(real(0, -1, -5))), { form: 'gain' }).imaginaryAxisCrossings
    const figures = { Kcr: crossing!.gain, Pcr: 2 * Math.PI / crossing!.frequency }
    holdAll(c, figures)
  })
})

describe(titled('E01'), () => {
  const c = publishedCase('E01')

  it('ultimate gain and period, which its second method starts from', () => {
    const [crossing] = analyzeLoop(loopOf([1], fromRoots(real(0, -1, -5))), { form: 'gain' }).imaginaryAxisCrossings
    const [Ku, Pu] = [crossing!.gain, 2 * Math.PI / crossing!.frequency]
    expectClose(Ku, c.inputs('Ku')[0]!, 1e-14, 'ultimate gain')
    expectClose(Pu, c.inputs('Pu')[0]!, 1e-14, 'ultimate period')
    holdAll(c, { ult_P: 0.5 * Ku, ult_PI: [0.45 * Ku, Pu / 1.2], ult_PI_ki: 0.45 * Ku / (Pu / 1.2), ult_PID: [0.6 * Ku, Pu / 2, Pu / 8] })
  })
})

describe(titled('C03'), () => {
  const c = publishedCase('C03')

  it.each([2, 3, 4, 5, 6])('Butterworth polynomial of order %i: its roots lie evenly on the unit circle', (order) => {
    const angles = Array.from({ length: order }, (_, k) => Math.PI * (1 + (1 + 2 * k - order) / (2 * order)))
    const found = roots(c.exact(`butter${order}`))
    for (const angle of angles) {
      expect(Math.min(...found.map(root => Math.hypot(root.re - Math.cos(angle), root.im - Math.sin(angle))))).toBeLessThan(1e-14)
    }
    holdAll(c, { [`butter${order}`]: fromRoots(found) })
  })

  it.each([2, 3, 4, 5])('Bessel polynomial of order %i: its roots make it again', (order) => {
    holdAll(c, { [`bessel${order}`]: fromRoots(roots(c.exact(`bessel${order}`))) }, 1e-13)
  })
})

describe(titled('C06'), () => {
  const symmetrical = loopOf([4, 1], [8, 8, 0, 0])

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
