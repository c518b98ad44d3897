import type { BestPoint, Candidate, SearchRoom } from '#shared/control/best-point/types'
import type { BestBody, BestLine } from '#shared/schemas/best'
import type { Complex } from '#shared/numerics/complex'
import { dampingRatioOf } from '#shared/control/design-point'
import { askForLines } from '~/utils/ask-server'

export type BestPointSearch = ReturnType<typeof useBestPoint>

interface Running {
  over: SearchRoom
  question: string
  /** Share of the search that is done. */
  share: number
  best: Pick<Candidate, 'designPoint' | 'settlingTime'> | null
}

const lost = 'The line to the server broke during the search. Nothing was changed; try again.'

/**
 * The search for the fastest point: started, watched, stopped, and what came of it. What was found holds for the loop, controller and requirements (and on
 * a ray for that ray) that were asked about; while the bench shows others it is kept back, since an undo may bring them again.
 */
export function useBestPoint() {
  const bench = useBenchStore()
  const running = shallowRef<Running | null>(null)
  const found = shallowRef<{ result: BestPoint, question: string } | null>(null)
  const problem = ref<string | null>(null)
  /** Where one stood before going to the point that was found. */
  const left = shallowRef<Complex | null>(null)
  let abort: AbortController | undefined

  const result = computed(() => found.value && found.value.question === questionOf(found.value.result.over) ? found.value.result : null)
  const outdated = computed(() => found.value !== null && result.value === null)
  const target = computed(() => result.value?.best ?? result.value?.closest ?? null)
  const isThere = computed(() => {
    const { re, im } = bench.document.designPoint
    return target.value !== null && target.value.designPoint.re === re && target.value.designPoint.im === im
  })
  const mayReturn = computed(() => isThere.value && left.value !== null)
  /** Where a ghost of the design point stands: the best so far, or what was found. */
  const ghost = computed<Complex | null>(() => running.value?.best?.designPoint ?? (isThere.value ? null : target.value?.designPoint ?? null))

  /** What an answer depends on. */
  function questionOf(over: SearchRoom): string {
    const { loop, controller, requirements, designPoint } = bench.document
    return JSON.stringify([loop, controller, requirements, over === 'ray' ? dampingRatioOf(designPoint).toPrecision(9) : null])
  }

  async function search(over: SearchRoom) {
    stop()
    const mine = abort = new AbortController()
    const question = questionOf(over)
    const { loop, controller, designPoint, requirements } = bench.document
    const body: BestBody = { loop, controller, designPoint, requirements, over }
    found.value = left.value = problem.value = null
    running.value = { over, question, share: 0, best: null }
    try {
      for await (const line of askForLines<BestLine>('/api/design/best', body, mine.signal)) {
        if (mine !== abort) return
        if ('result' in line) found.value = { result: markRaw(line.result), question }
        else if ('error' in line) problem.value = line.error.message
        else running.value = { over, question, share: line.progress, best: line.best }
      }
      if (!found.value) problem.value ??= lost
    } catch (error) {
      if (mine === abort) problem.value = error instanceof TypeError ? lost : sentence((error as Error).message)
    } finally {
      if (mine === abort) running.value = null
    }
  }

  /** Ends a search that is under way; the server hears of it, too. */
  function stop() {
    abort?.abort()
    abort = undefined
    running.value = null
  }

  function go() {
    if (!target.value || isThere.value) return
    const { re, im } = target.value.designPoint
    left.value = bench.document.designPoint
    bench.moveDesignPoint({ re, im })
  }

  function goBack() {
    if (mayReturn.value) bench.moveDesignPoint(left.value!)
  }

  watch(() => running.value !== null && running.value.question !== questionOf(running.value.over), (changed) => {
    if (!changed) return
    stop()
    problem.value = 'What was asked for has changed, so the search was given up.'
  })
  watch(() => bench.loads, () => {
    stop()
    found.value = problem.value = null
  })
  onScopeDispose(stop)

  return reactive({ running, result, outdated, target, isThere, mayReturn, ghost, problem, search, stop, go, goBack })
}

/** Messages of the server about a design begin small, to stand after a field's name. */
function sentence(message: string): string {
  return `${message[0]?.toUpperCase() ?? ''}${message.slice(1)}`.replace(/[^.]$/, '$&.')
}
