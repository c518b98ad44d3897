import type { MaybeRefOrGetter } from 'vue'
import type { Loop } from '#shared/schemas/loop'
import { areGainsOf } from '~/utils/bench/controller-forms'

/** The even grid of the chart: a point for every pixel or two of a pane. */
const samples = 240

/** Asks for the loop over frequency at the gains of each new solution, for as long as somebody looks at it. */
export function useFrequencyView(open: MaybeRefOrGetter<boolean>) {
  const bench = useBenchStore()
  const solving = useSolutionStore()
  const frequency = useFrequencyStore()
  let lastLoop: Loop | null = null

  onMounted(() => {
    watch([() => toValue(open), () => solving.solution] as const, ([isOpen, solution]) => {
      if (!isOpen) return frequency.close()
      frequency.open = true
      const { loop, controller } = bench.document
      // An answer may lag behind a change of the form: its gains then belong to the form before.
      if (!solution || !areGainsOf(controller.form, solution.gains)) return
      const { gains, readings, stable } = solution
      frequency.ask({ body: { loop, controller, gains, samples }, readings, stable }, lastLoop !== null && loop !== lastLoop)
      lastLoop = loop
    }, { immediate: true })
  })
  onScopeDispose(() => frequency.close())
}
