import type { LoopAnalysis } from '#shared/control/types'
import type { Plant } from '#shared/schemas/loop'
import { askServer } from '~/utils/ask-server'
import { ratioText } from '~/utils/bench/formula-text'

export type PlantForm = Plant['form']

/**
 * Choosing in which form the plant is described. The server reads the plant in its present form, and what it finds is written in the other; a
 * form that was used before and still means the same plant comes back exactly as it was typed.
 */
export function usePlantForms() {
  const bench = useBenchStore()
  const notice = ref<string | null>(null)
  /** The plant right after the last choice: as long as it stands unedited, all drafts mean the same plant. */
  let chosen = ''

  async function choose(form: PlantForm) {
    const present = bench.document.loop.plant
    if (form === present.form) return
    notice.value = null
    const kept = JSON.stringify(present) === chosen ? bench.plantDrafts : {}
    const drafts = { ...kept, [present.form]: present }
    const plant = drafts[form] ?? await convert(present, form) ?? fresh(form)
    if (bench.document.loop.plant !== present) return
    bench.plantDrafts = drafts
    chosen = JSON.stringify(plant)
    bench.change((draft) => { draft.loop.plant = plant })
  }

  async function convert(plant: Plant, form: PlantForm): Promise<Plant | null> {
    try {
      const { openLoop } = await askServer<LoopAnalysis>('/api/loop/analyze', { loop: { plant }, controller: { form: 'gain' } })
      return write(openLoop, form)
    }
    catch {
      return null
    }
  }

  function fresh(form: PlantForm): Plant {
    notice.value = 'The plant could not be converted, so this form begins with 1/(s² + s). What you typed before is kept in its form.'
    return write({ numerator: [1], denominator: [1, 1, 0], zeros: [], poles: [{ re: 0, im: 0 }, { re: -1, im: 0 }] }, form)
  }

  return { choose, notice }
}

function write({ numerator, denominator, zeros, poles }: Pick<LoopAnalysis['openLoop'], 'numerator' | 'denominator' | 'zeros' | 'poles'>, form: PlantForm): Plant {
  switch (form) {
    case 'expression': return { form, expression: ratioText(numerator, denominator), parameters: {} }
    case 'coefficients': return { form, numerator, denominator }
    case 'zeros-poles-gain': return { form, zeros, poles, gain: numerator[0]! / denominator[0]! }
  }
}
