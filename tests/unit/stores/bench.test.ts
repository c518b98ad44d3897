import '../../helpers/auto-imports'
import { createPinia, setActivePinia } from 'pinia'
import { beforeEach, describe, expect, it } from 'vitest'
import { useBenchStore } from '~/stores/bench'
import type { ScenarioDocument } from '#shared/schemas/document'
import { seededRandom } from '../../helpers/random'

const document: ScenarioDocument = {
  loop: { plant: { form: 'coefficients', numerator: [1], denominator: [1, 1, 0] } },
  controller: { form: 'gain' },
  designPoint: { dampingRatio: 0.6, naturalFrequency: 2 },
  requirements: [],
  notes: '',
}

function loaded() {
  const bench = useBenchStore()
  bench.load({ document, title: 'Slew', machine: 'Crane', mode: 'own', scenarioId: 'abc', version: 3 })
  return bench
}

describe('bench store', () => {
  beforeEach(() => setActivePinia(createPinia()))

  it('holds the design point in rectangular form and leaves what was loaded alone', () => {
    const bench = loaded()
    expect(bench.document.designPoint).toEqual({ re: -1.2, im: 1.6 })
    bench.change((draft) => { draft.notes = 'x' })
    expect(document.notes).toBe('')
    expect(document.designPoint).toEqual({ dampingRatio: 0.6, naturalFrequency: 2 })
    expect([bench.scenarioId, bench.version, bench.axis]).toEqual(['abc', 3, ''])
  })

  it('makes one step of one drag', () => {
    const bench = loaded()
    bench.beginGesture()
    for (let i = 1; i <= 20; i++) bench.moveDesignPoint({ re: -1 - i, im: 2 })
    bench.endGesture()
    expect(bench.document.designPoint).toEqual({ re: -21, im: 2 })
    bench.undo()
    expect(bench.document.designPoint).toEqual({ re: -1.2, im: 1.6 })
    expect(bench.canUndo).toBe(false)
    bench.redo()
    expect(bench.document.designPoint).toEqual({ re: -21, im: 2 })
    expect(bench.canRedo).toBe(false)
  })

  it('returns to where a drag began when it is cancelled, and leaves no step', () => {
    const bench = loaded()
    bench.beginGesture()
    bench.moveDesignPoint({ re: -9, im: 9 })
    bench.cancelGesture()
    expect(bench.document.designPoint).toEqual({ re: -1.2, im: 1.6 })
    expect([bench.canUndo, bench.canRedo, bench.dirty]).toEqual([false, false, false])
  })

  it('takes undo in the middle of a drag for its cancellation', () => {
    const bench = loaded()
    bench.moveDesignPoint({ re: -5, im: 0 })
    bench.beginGesture()
    bench.moveDesignPoint({ re: -9, im: 9 })
    bench.undo()
    expect(bench.document.designPoint).toEqual({ re: -5, im: 0 })
    expect(bench.canUndo).toBe(true)
  })

  it('leaves no step of a drag that ends where it began', () => {
    const bench = loaded()
    bench.beginGesture()
    bench.moveDesignPoint({ re: -9, im: 9 })
    bench.moveDesignPoint({ re: -1.2, im: 1.6 })
    bench.endGesture()
    expect([bench.canUndo, bench.dirty]).toEqual([false, false])
  })

  it('keeps the upper one of the pair', () => {
    const bench = loaded()
    bench.moveDesignPoint({ re: -1, im: -3 })
    expect(bench.document.designPoint).toEqual({ re: -1, im: 3 })
  })

  it('drops what was undone once something else is done', () => {
    const bench = loaded()
    bench.moveDesignPoint({ re: -2, im: 1 })
    bench.undo()
    bench.change((draft) => { draft.notes = 'another way' })
    expect(bench.canRedo).toBe(false)
    bench.redo()
    expect(bench.document.notes).toBe('another way')
  })

  it('knows what is unsaved: by the document that was sent, by the title, and back again by undo', () => {
    const bench = loaded()
    bench.moveDesignPoint({ re: -2, im: 1 })
    expect(bench.dirty).toBe(true)
    bench.undo()
    expect(bench.dirty).toBe(false)
    bench.redo()
    const sent = bench.document
    bench.moveDesignPoint({ re: -3, im: 1 })
    bench.markSaved({ id: 'abc', version: 4, document: sent })
    expect([bench.dirty, bench.version, bench.mode]).toEqual([true, 4, 'own'])
    bench.undo()
    expect(bench.dirty).toBe(false)
    bench.title = 'Another title'
    expect(bench.dirty).toBe(true)
  })

  it('walks back and forth through any mixture of steps without losing one', () => {
    const random = seededRandom(20261201)
    const bench = loaded()
    const seen = [JSON.stringify(bench.document)]
    for (let i = 0; i < 60; i++) {
      if (random() < 0.5) bench.change((draft) => { draft.notes = `note ${i}` })
      else {
        bench.beginGesture()
        for (let j = 0; j < 3; j++) bench.moveDesignPoint({ re: -random() * 10, im: random() * 10 })
        bench.endGesture()
      }
      seen.push(JSON.stringify(bench.document))
    }
    const back = [JSON.stringify(bench.document)]
    while (bench.canUndo) {
      bench.undo()
      back.unshift(JSON.stringify(bench.document))
    }
    expect(back).toEqual(seen)
    while (bench.canRedo) bench.redo()
    expect(JSON.stringify(bench.document)).toBe(seen.at(-1))
  })
})
