import { describe, expect, it } from 'vitest'
import { deadTimeNote, locusFacts, locusFactsText, realAxisSegments } from '~/utils/bench/locus-facts'
import { analyzeLoop } from '#shared/control/analyze'
import type { LoopAnalysis } from '#shared/control/types'
import { loopOf, real } from '../../helpers/loops'

/** What is needed of an analysis, the numbers as they stand. */
const analysis = (part: Partial<Omit<LoopAnalysis, 'openLoop'>> & { openLoop?: Partial<LoopAnalysis['openLoop']> }): LoopAnalysis => ({
  asymptotes: null, breakaways: [], imaginaryAxisCrossings: [], departures: [], arrivals: [], stableGain: [], branches: [],
  ...part,
  openLoop: { numerator: [1], denominator: [1], zeros: [], poles: [], deadTime: 0, type: 0, relativeDegree: 0, ...part.openLoop },
})

/** Rounded, so that figures can be written down. */
const plain = (value: unknown): unknown => JSON.parse(JSON.stringify(value, (_, each: unknown) =>
  each === -Infinity ? '-inf' : each === Infinity ? 'inf' : typeof each === 'number' ? Number(each.toPrecision(9)) : each))

describe('the facts of a locus', () => {
  // K. Ogata, "Modern Control Engineering", Example 6-1: 1/(s(s + 1)(s + 2)), asymptotes from -1, breakaway at -0.4226 (K = 0.3849), K < 6.
  it('come in the order of drawing by hand', () => {
    const facts = locusFacts(analyzeLoop(loopOf([1], [1, 3, 2, 0]), { form: 'gain' }))
    expect(plain(facts)).toEqual([
      { name: 'Pole', place: { re: -2, im: 0 }, angleDeg: 180 },
      { name: 'Pole', place: { re: -1, im: 0 }, angleDeg: 0 },
      { name: 'Pole', place: { re: 0, im: 0 }, angleDeg: 180 },
      { name: 'Real axis', place: [-1, 0] },
      { name: 'Real axis', place: ['-inf', -2] },
      { name: 'Centroid', place: { re: -1, im: 0 } },
      { name: 'Asymptote', angleDeg: 60 }, { name: 'Asymptote', angleDeg: 180 }, { name: 'Asymptote', angleDeg: 300 },
      { name: 'Breakaway or break-in', place: { re: -0.422649731, im: 0 }, gain: 0.384900179 },
      { name: 'Imaginary-axis crossing', place: { re: 0, im: 1.41421356 }, gain: 6 },
      { name: 'Stable gain', gain: [0, 6] },
    ])
  })

  it('give a double pole two angles, a cancelled one none, and a zero its angle of arrival', () => {
    const facts = locusFacts(analyzeLoop(loopOf([1, 4, 3], [1, 3, 0, 0]), { form: 'gain' }))
    expect(plain(facts.filter(({ name }) => ['Pole', 'Zero'].includes(name)))).toEqual([
      { name: 'Pole', place: { re: -3, im: 0 } },
      { name: 'Pole', place: { re: 0, im: 0 }, angleDeg: -90 },
      { name: 'Pole', place: { re: 0, im: 0 }, angleDeg: 90 },
      { name: 'Zero', place: { re: -3, im: 0 } },
      { name: 'Zero', place: { re: -1, im: 0 }, angleDeg: 180 },
    ])
    // The pair that cancels leaves no gap in the axis.
    expect(facts.filter(({ name }) => name === 'Real axis').map(({ place }) => place)).toEqual([[-3, -1], [-Infinity, -3]])
  })

  it('say when no gain is stable', () => {
    expect(locusFacts(analysis({ stableGain: [] })).at(-1)).toEqual({ name: 'No stable gain' })
  })
})

describe('a dead time', () => {
  it('has horizontals in place of asymptotes, at other multiples where the gain of L0 is negative', () => {
    expect(deadTimeNote(analysis({}).openLoop)).toBeNull()
    for (const [gain, multiples] of [[1, 'odd'], [-1, 'even']] as const) {
      const delayed = analyzeLoop({ ...loopOf([gain], [1, 1]), deadTime: 0.5 }, { form: 'gain' })
      expect(deadTimeNote(delayed.openLoop)).toContain(`at the ${multiples} multiples of π/T = 6.283 rad/s`)
    }
  })
})

describe('stretches of the real axis', () => {
  const on = (poles: number[], zeros: number[], gain = 1) => realAxisSegments(analysis({ openLoop: { poles: real(...poles), zeros: real(...zeros), numerator: [gain] } }).openLoop)

  it('have an odd number of poles and zeros to their right', () => {
    expect(on([0, -2], [-3])).toEqual([[-2, 0], [-Infinity, -3]])
    expect(on([0, -2, -5], [-3])).toEqual([[-2, 0], [-5, -3]])
    expect(on([], [])).toEqual([])
  })

  it('have an even number there where the gain of L0 is negative', () => {
    expect(on([0, -2], [], -1)).toEqual([[0, Infinity], [-Infinity, -2]])
    // 1 - K/(s² + 2 s + 2) = 0: the roots -1 ± sqrt(K - 1) run over the whole axis.
    const openLoop = { poles: [{ re: -1, im: 1 }, { re: -1, im: -1 }], numerator: [-1] }
    expect(realAxisSegments(analysis({ openLoop }).openLoop)).toEqual([[-Infinity, Infinity]])
  })

  it('leave out a double pole, which has no length, and pairs, which the axis does not see', () => {
    const openLoop = { poles: [...real(0, 0, -4), { re: -1, im: 2 }, { re: -1, im: -2 }] }
    expect(realAxisSegments(analysis({ openLoop }).openLoop)).toEqual([[-Infinity, -4]])
  })
})

describe('the table to copy', () => {
  it('is tab-separated, in full precision, with two lines for what has two ends', () => {
    const text = locusFactsText(analysis({
      openLoop: { type: 1, relativeDegree: 2, poles: [{ re: 0, im: 0 }, { re: -1 / 3, im: 0 }], denominator: [1, 1 / 3, 0] },
      asymptotes: { centroid: -1 / 6, anglesDeg: [90, 270] },
      departures: [{ pole: { re: 0, im: 0 }, angleDeg: 180 }],
      imaginaryAxisCrossings: [{ frequency: 2.5, gain: 1e-7 }],
      stableGain: [[0, 0.1], [3, null]],
    }), 'k')
    expect(text.split('\n')).toEqual([
      'Type\t1',
      'Relative degree\t2',
      'Fact\tReal part (rad/s)\tImaginary part (rad/s)\tGain (k)\tAngle (deg)',
      'Pole\t0\t0\t\t180',
      'Pole\t-0.3333333333333333\t0\t\t',
      'Real axis, from\t-0.3333333333333333\t0\t\t',
      'Real axis, to\t0\t0\t\t',
      'Centroid\t-0.16666666666666666\t0\t\t',
      'Asymptote\t\t\t\t90',
      'Asymptote\t\t\t\t270',
      'Imaginary-axis crossing\t0\t2.5\t1e-7\t',
      'Stable gain, from\t\t\t0\t',
      'Stable gain, to\t\t\t0.1\t',
      'Stable gain, from\t\t\t3\t',
      'Stable gain, to\t\t\tno limit\t',
      '',
    ])
  })

  it('writes an end at infinity in words and names what the gain is', () => {
    const text = locusFactsText(analysis({ openLoop: { poles: real(-2) } }), 'factor on the present gains')
    expect(text).toContain('Real axis, from\tminus infinity\t0\t\t\nReal axis, to\t-2\t0\t\t\n')
    expect(text).toContain('\tGain (factor on the present gains)\t')
  })
})
