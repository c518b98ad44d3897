import { describe, expect, it } from 'vitest'
import { diagramWidth, drawLoop, sayLoop, type LoopParts, type Stop } from '~/utils/bench/block-diagram'

const bare: LoopParts = { controller: { block: 'k', spoken: 'the gain k' }, rateGain: false, fixedRate: false, sensor: false, deadTime: 0, oneSampleLate: false }
const whole: LoopParts = { ...bare, rateGain: true, fixedRate: true, sensor: true, deadTime: 0.002, limit: 5, samplePeriod: 0.001, oneSampleLate: true }
const words = (stops: Stop[]) => stops.map(({ kind, text, power = '' }) => text === undefined ? kind : text + power)

describe('the block diagram', () => {
  it('keeps to one row where nothing stands between controller and plant', () => {
    const { stops, height } = drawLoop(bare)
    expect(words(stops)).toEqual(['sum', 'k', 'plant'])
    expect(new Set(stops.map(({ y }) => y)).size).toBe(1)
    expect(height).toBe(78)
  })

  it('shows what stands between, in the order in which the signal passes it', () => {
    expect(words(drawLoop({ ...bare, deadTime: 0.002 }).stops)).toEqual(['sum', 'k', 'e−sT', 'plant'])
    expect(words(drawLoop({ ...bare, samplePeriod: 0.001 }).stops)).toEqual(['sum', 'switch', 'k', 'hold', 'plant'])
    expect(words(drawLoop(whole).stops)).toEqual(['sum', 'switch', 'k', 'sum', 'z−1', 'hold', 'limit', 'e−sT', 'sum', 'plant', 'sensor', 'fixed rate', 'kr s'])
    expect(drawLoop(whole).stops.flatMap(({ caption }) => caption ?? [])).toEqual(['1\u00A0ms', '±5', '2\u00A0ms'])
  })

  it('draws nothing upon another thing, nor beyond its edges, whatever the loop consists of', () => {
    for (let bits = 0; bits < 128; bits += 1) {
      const has = (bit: number) => (bits >> bit & 1) === 1
      const { stops, height } = drawLoop({
        ...bare, rateGain: has(0), fixedRate: has(1), sensor: has(2), deadTime: has(3) ? 0.1 : 0, limit: has(4) ? 5 : undefined,
        samplePeriod: has(5) ? 0.1 : undefined, oneSampleLate: has(5) && has(6),
      })
      for (const [index, { x, y, width, height: tall }] of stops.entries()) {
        expect(x - width / 2 > 0 && x + width / 2 < diagramWidth && y + tall / 2 < height).toBe(true)
        for (const other of stops.slice(index + 1)) {
          const apart = Math.abs(x - other.x) > (width + other.width) / 2 + 5 || Math.abs(y - other.y) > (tall + other.height) / 2 + 3
          expect(apart, `${bits}: ${JSON.stringify([stops[index], other])}`).toBe(true)
        }
      }
    }
  })

  it('is told in words', () => {
    expect(sayLoop(bare)).toBe('Block diagram: the error goes through the gain k into the plant; the output is fed back to the sum.')
    expect(sayLoop(whole)).toBe('Block diagram: the error is sampled every 1\u00A0ms and goes through the gain k, a computing delay of one sample, a hold, a limit of ±5 '
      + 'and a dead time of 2\u00A0ms into the plant, with fixed rate fed back around the plant and kr s fed back behind the gain; '
      + 'the output is fed back to the sum through the sensor.')
  })
})
