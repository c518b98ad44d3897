import type { DesignSolution, Gains } from '#shared/control/types'
import type { Complex } from '#shared/numerics/complex'
import type { ControllerForm } from '#shared/schemas/loop'
import { controllerForms } from '~/utils/bench/controller-forms'
import { nearestRoot } from '~/utils/bench/nearest-root'

/** Typed gains: the server says where they put the loop, and the design point goes there. */
export function useTypedGains() {
  const bench = useBenchStore()
  const store = useSolutionStore()
  const problem = ref<string | null>(null)

  watch(() => bench.document, () => { problem.value = null })

  /** One gain among the present ones; the others stay. */
  async function typeGain(name: string, value: number) {
    const present = store.solution?.gains
    if (!present) return
    const gains = { ...present, [name]: value } as Gains
    const { controller } = bench.document
    if (!controllerForms[controller.form].reachesEveryPoint && 'k' in gains && gains.k <= 0) {
      problem.value = 'The locus is drawn for gains greater than 0.'
      return
    }
    await goTo(gains)
  }

  let asked = 0
  /** The design point goes where these gains put the loop. Of several asked for one after the other the last counts. */
  async function goTo(gains: Gains) {
    const { loop, controller } = bench.document
    const number = ++asked
    const answer = await store.evaluateGains({ loop, controller }, gains)
    if (number !== asked || bench.document.loop !== loop || bench.document.controller !== controller) return
    if (!('gains' in answer)) {
      problem.value = answer.message
      return
    }
    const point = pointFor(answer, controller.form, bench.document.designPoint)
    if (point) bench.moveDesignPoint(point)
    else problem.value = 'With these gains every root is real, and no design point of this form stands for them.'
  }

  return { typeGain, goTo, problem }
}

/**
 * The root that stands for the gains: the dominant one. Forms that reach every point are given back by a complex pair alone (at a real point the
 * placement is another one, a double root), so there the pair nearest to the present point stands in.
 */
function pointFor(answer: DesignSolution, form: ControllerForm['form'], present: Complex): Complex | null {
  if (!controllerForms[form].reachesEveryPoint || answer.designPoint.im > 0) return answer.designPoint
  return nearestRoot(answer.closedLoopPoles.filter(pole => pole.im > 0), present)
}
