import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { frequencyResponse } from '#shared/control/frequency/frequency-response'
import { closeLoop } from '#shared/control/closed-loop'
import type { FrequencyAnswer } from '~/utils/frequency/answer'
import { markedFrequencies, nextMark, readingsNear } from '~/utils/frequency/marks'
import { decadesOf, frequencyAt, type Pane } from '~/utils/frequency/pane'
import { drawFrequency } from '~/utils/frequency/picture'
import { boxOf, placeWords, type Box } from '~/utils/frequency/place-words'
import { readAt } from '~/utils/frequency/read-at'
import { formatDecade, loopScale, sensitivityRange, wholeDecades } from '~/utils/frequency/scale'
import { describeFrequency, sayFigures } from '~/utils/frequency/words'
import { xOf, yOf } from '~/utils/response/draw'
import { evaluateLoop, loopOf, product } from '../../helpers/loops'
import { seededRandom } from '../../helpers/random'
import { arbitraryLoop } from '../../helpers/arbitrary-loop'

const size = { width: 780, height: 220 }
const plain = (text: string) => text.replace(/\u00A0/g, ' ').replace(/\u2212/g, '-')

function answerOf(numerator: number[], denominator: number[]): FrequencyAnswer {
  const { readings, stable } = evaluateLoop({ numerator, denominator })
  return { response: frequencyResponse(closeLoop(loopOf(numerator, denominator), { form: 'gain' }, { k: 1 }), { samples: 240 }), readings, stable }
}

const pane = (answer: FrequencyAnswer, name: Pane['name']) => drawFrequency(answer, size, name)[0]!
/** 10/(s (s + 1) (s + 5)): gain margin 3 at sqrt 5, phase margin 25.39 degrees (published.json, D01). */
const known = answerOf([10], product([1, 0], [1, 1], [1, 5]))

describe('the drawing of the loop', () => {
  it('measures both margins from the line that 0 dB and -180 degrees share', () => {
    const { panel, dimensions, levels } = pane(known, 'loop')
    const [phase, gain] = dimensions
    const line = yOf(panel, 0)
    expect(levels.find(level => level.critical)).toMatchObject({ y: line, left: '0\u00A0dB', right: '−180°' })
    expect([phase!.lower, gain!.upper]).toEqual([expect.closeTo(line, 9), line])
    expect(gain!.lower - gain!.upper).toBeCloseTo(20 * Math.log10(3) * (panel.bottom - panel.top) / (panel.value.max - panel.value.min), 6)
    // 45 degrees stand as high as 20 dB.
    expect((phase!.lower - phase!.upper) / (gain!.lower - gain!.upper)).toBeCloseTo(25.389823263353765 / 45 * 20 / (20 * Math.log10(3)), 6)
    expect(gain!.x).toBeCloseTo(xOf(panel, Math.log10(Math.sqrt(5))), 9)
    expect([phase!.text, plain(gain!.text)]).toEqual(['25.4°', '9.5 dB'])
  })

  it('leaves out what does not exist and what is out of sight', () => {
    expect(pane(answerOf([1], [1, 1, 0]), 'loop').dimensions.map(({ reading }) => reading)).toEqual(['phaseMarginDeg'])
    expect(pane(answerOf([0.1], [1, 1]), 'loop').dimensions).toEqual([])
    expect(pane(answerOf([3], [1, 1]), 'sensitivity').dimensions).toEqual([])
  })

  it('points arrows inward where a margin is small, and tells a negative one', () => {
    const narrow = pane(answerOf([29], product([1, 0], [1, 1], [1, 5])), 'loop')
    expect(narrow.dimensions.map(({ short }) => short)).toEqual([true, true])
    const unstable = pane(answerOf([100], product([1, 0], [1, 1], [1, 5])), 'loop')
    expect(unstable.dimensions.map(({ text }) => plain(text))).toEqual(['-23.7°', '-10.5 dB'])
    expect(unstable.dimensions[0]!.upper).toBeCloseTo(yOf(unstable.panel, 0), 9)
  })

  it('chooses round scales that hold the margins', () => {
    expect(loopScale(known.response, known.readings.gainMarginDb)).toEqual({ range: { min: -60, max: 40 }, degreesPerDb: 2.25 })
    // A phase that begins at 0 degrees needs 90 degrees to a grid line.
    const lag = answerOf([20], [1, 3, 3, 1])
    expect(loopScale(lag.response, null).degreesPerDb).toBe(4.5)
    const far = answerOf([1e-4], product([1, 0], [1, 1], [1, 5]))
    expect(loopScale(far.response, far.readings.gainMarginDb).range.min).toBeLessThanOrEqual(-20 * Math.log10(30e4))
    // The peak of |S| is 8.9 dB.
    expect(sensitivityRange(known.response)).toEqual({ min: -40, max: 20 })
  })

  it('keeps every figure in the drawing, for random loops in rooms of any size', () => {
    const random = seededRandom(31)
    for (const [n, { numerator, denominator }] of fc.sample(arbitraryLoop(1, 6), { seed: 31, numRuns: 80 }).entries()) {
      const answer = answerOf(numerator, denominator)
      const room = { width: 300 + 900 * random(), height: 150 + 200 * random() }
      const panes = drawFrequency(answer, room, room.width < 600 ? 'loop' : null)
      for (const { panel, curves, dimensions, bandwidth } of panes) {
        expect(curves.every(({ path }) => !/NaN|Infinity/.test(path))).toBe(true)
        const words = [
          ...dimensions.map(one => boxOf(one.words, one.text)), ...curves.flatMap(one => one.label ? [boxOf(one.label, one.name)] : []),
          ...bandwidth ? [boxOf(bandwidth.words, bandwidth.text)] : [],
        ]
        const isInside = ({ left, right, top, bottom }: Box) =>
          left > panel.left - 1 && right < panel.right + 1 && top > panel.top - 12 && bottom < panel.bottom + 12
        expect(words.every(isInside), `loop ${n}: ${JSON.stringify({ words, panel })}`).toBe(true)
      }
    }
  })
})

describe('figures under the cursor', () => {
  it('are read between the points of the grid, and nowhere beyond them', () => {
    const { response } = known
    const [first, last] = [response.frequency[0]!, response.frequency.at(-1)!]
    expect(readAt(response, first)).toMatchObject({ magnitudeDb: response.magnitudeDb[0], phaseDeg: response.phaseDeg[0] })
    expect(readAt(response, last)!.sensitivityDb).toBe(response.sensitivityDb.at(-1))
    expect([readAt(response, first / 2), readAt(response, last * 2), readAt(response, Number.NaN)]).toEqual([null, null, null])
    expect(readAt(response, Math.sqrt(5))!.magnitudeDb).toBeCloseTo(-20 * Math.log10(3), 2)
    expect(plain(sayFigures(Math.sqrt(5), readAt(response, Math.sqrt(5))!)))
      .toBe('2.24 rad/s: loop -9.5 dB at -180.0°, sensitivity 3.5 dB, complementary sensitivity -6.0 dB')
  })

  it('find their frequency from a place and stay within the axis', () => {
    const { panel } = pane(known, 'loop')
    expect(frequencyAt(panel, xOf(panel, Math.log10(3)))).toBeCloseTo(3, 9)
    expect([frequencyAt(panel, -100), frequencyAt(panel, 1e4)]).toEqual([expect.closeTo(0.1, 9), expect.closeTo(100, 9)])
  })
})

describe('marked frequencies', () => {
  const marks = markedFrequencies(known.readings, known.response)

  it('belong to the margins, the peak and the bandwidth', () => {
    expect(marks.map(({ reading }) => reading)).toEqual(['phaseMarginDeg', 'gainMarginDb', 'sensitivityPeak', 'bandwidth'])
    expect(marks[1]!.frequency).toBeCloseTo(Math.sqrt(5), 9)
    // A crossing at w = 0 has no place on a logarithmic axis.
    expect(markedFrequencies({ ...known.readings, phaseCrossover: 0, bandwidth: null, gainCrossover: null }, { sensitivityPeakFrequency: null })).toEqual([])
  })

  it('are near within a few per cent and follow one another', () => {
    expect(readingsNear([{ reading: 'bandwidth', frequency: 2 }], 2.1)).toEqual(['bandwidth'])
    expect(readingsNear([{ reading: 'bandwidth', frequency: 2 }], 2.2)).toEqual([])
    expect(readingsNear(marks, null)).toEqual([])
    const [lowest, highest] = [Math.min(...marks.map(mark => mark.frequency)), Math.max(...marks.map(mark => mark.frequency))]
    expect([nextMark(marks, 1e-3, 1), nextMark(marks, 1e3, -1)]).toEqual([lowest, highest])
    expect([nextMark(marks, highest, 1), nextMark(marks, lowest, -1)]).toEqual([null, null])
  })
})

describe('words', () => {
  it('tell the drawing in sentences', () => {
    const words = plain(describeFrequency(known))
    expect(words).toMatch(/^The loop crosses 0 dB at 1\.23 rad\/s: phase margin 25\.4°\. Its phase crosses -180° at 2\.24 rad\/s: gain margin 9\.5 dB\. /)
    expect(words).toMatch(/ The sensitivity peak [\d.]+ at [\d.]+ rad\/s\. The bandwidth [\d.]+ rad\/s\.$/)
    expect(plain(describeFrequency(answerOf([0.1], [1, 1])))).toMatch(/^The loop never crosses 0 dB\. Its phase never crosses -180°\./)
  })

  it('name decades plainly, and in powers of ten where that would be long', () => {
    expect([-3, 0, 4, 5, -4].map(formatDecade)).toEqual(['0.001', '1', '10000', '10⁵', '10⁻⁴'])
    expect(wholeDecades({ min: -1, max: 3 }, Infinity)).toEqual([-1, 0, 1, 2, 3])
    expect(wholeDecades({ min: -5, max: 5 }, 4)).toEqual([-3, 0, 3])
    expect(wholeDecades({ min: 0.2, max: 0.8 }, 5)).toEqual([])
  })

  it('stand where they cover the least', () => {
    const { panel } = pane(known, 'loop')
    const [first, second] = [{ x: 100, y: 100, anchor: 'start' }, { x: 200, y: 100, anchor: 'start' }] as const
    const free = { panel, curves: [], boxes: [] }
    expect(placeWords('9.5 dB', [first, second], free)).toBe(first)
    expect(placeWords('9.5 dB', [first, second], { ...free, boxes: [boxOf(first, '9.5 dB')] })).toBe(second)
    expect(placeWords('9.5 dB', [{ ...first, x: panel.right - 5 }, second], free)).toBe(second)
  })
})

describe('the figures under a frequency axis', () => {
  it('never run into each other', () => {
    for (let width = 200; width < 700; width += 20) {
      const panel = { left: 40, right: 40 + width, top: 0, bottom: 100, along: { min: -1, max: 4 }, value: { min: 0, max: 1 } }
      const named = decadesOf(panel).filter(({ text }) => text !== null)
      expect(named.at(-1)!.text).toContain('rad/s')
      const boxes = named.map(({ x, text, anchor }) => ({ from: x - 6.5 * text!.length * (anchor === 'end' ? 1 : 0.5), to: x + 6.5 * text!.length * (anchor === 'end' ? 0 : 0.5) }))
      for (let i = 1; i < boxes.length; i++) expect(boxes[i]!.from).toBeGreaterThan(boxes[i - 1]!.to)
    }
  })
})
