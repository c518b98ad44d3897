import type { MaybeRefOrGetter } from 'vue'
import type { Complex } from '#shared/numerics/complex'
import type { DesignSolution, ResponseInput } from '#shared/control/types'
import type { AnalyzeQuestion, SolveQuestion } from '~/stores/solution'
import { dampingRatioOf } from '#shared/control/design-point'
import { areGainsOf } from '~/utils/bench/controller-forms'
import { calmDuration, type TimeFrame } from '~/utils/bench/calm-duration'

/**
 * Asks the server about the document on the bench whenever it changes, for as long as the calling component lives: the design for each
 * position, the locus whenever the loop, the controller, the ray or (for forms with several gains) the gains change.
 */
export function useSolver(options: { input: MaybeRefOrGetter<ResponseInput> }) {
  const bench = useBenchStore()
  const store = useSolutionStore()
  /** Seconds of response asked for. It moves seldom, so that the time axis stays still under the hand. */
  const frame = shallowRef<TimeFrame | null>(null)
  let lastLoop = ''
  let lastDesign = ''
  let lastAnalysis = ''

  const solveQuestion = computed<SolveQuestion>(() => {
    const { loop, controller, designPoint, requirements } = bench.document
    return { loop, controller, designPoint, requirements, response: { input: toValue(options.input), duration: frame.value?.duration } }
  })

  const analyzeQuestion = computed<AnalyzeQuestion | null>(() => {
    const { loop, controller, designPoint } = bench.document
    // An answer may lag behind a change of the form: its gains then belong to the form before.
    const gains = store.solution && areGainsOf(controller.form, store.solution.gains) ? store.solution.gains : null
    if (controller.form !== 'gain' && gains === null) return null
    const question: AnalyzeQuestion = { loop, controller }
    const dampingRatio = rayOf(designPoint)
    if (dampingRatio !== null) question.dampingRatio = dampingRatio
    if (controller.form !== 'gain' && gains !== null) question.gains = gains
    return question
  })

  function askSolve(question: SolveQuestion) {
    const design = JSON.stringify(question)
    if (design === lastDesign) return
    lastDesign = design
    const loop = JSON.stringify([question.loop, question.controller])
    store.solve(question, loop !== lastLoop)
    lastLoop = loop
  }

  function askAnalyze(question: AnalyzeQuestion | null) {
    const analysis = JSON.stringify(question)
    if (!question || analysis === lastAnalysis) return
    const outdates = lastAnalysis !== '' && loopOf(lastAnalysis) !== loopOf(analysis)
    lastAnalysis = analysis
    store.analyze(question, outdates)
  }

  onMounted(() => {
    watch(solveQuestion, askSolve, { immediate: true })
    watch(analyzeQuestion, askAnalyze, { immediate: true })
    watch(() => store.solution, (solution: DesignSolution | null) => {
      if (solution) frame.value = calmDuration(frame.value, solution)
    }, { immediate: true })
  })
  onScopeDispose(() => store.clear())
}

/** The damping ratio of the ray through a point, without the rounding that a drag along the ray leaves; null where the analysis takes none. */
function rayOf(point: Complex): number | null {
  const dampingRatio = Number(dampingRatioOf(point).toPrecision(12))
  return dampingRatio > 0 && dampingRatio <= 1 ? dampingRatio : null
}

function loopOf(question: string): string {
  const { loop, controller } = JSON.parse(question) as AnalyzeQuestion
  return JSON.stringify([loop, controller])
}
