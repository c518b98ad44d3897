import type { DesignSolution, Gains, LoopAnalysis } from '#shared/control/types'
import type { AnalyzeBody, SolveAnswer, SolveBody } from '#shared/schemas/design'
import type { ErrorBody, Issue } from '#shared/schemas/errors'
import { askServer } from '~/utils/ask-server'
import { newestWaits, RefusedError, type AskingState } from '~/utils/newest-waits'

/** What is asked; the server's defaults fill what is left out. */
export type SolveQuestion = Omit<SolveBody, 'requirements'> & Partial<Pick<SolveBody, 'requirements'>>
export type AnalyzeQuestion = AnalyzeBody

/** `waiting`: the answer is late or the server is gone; `failed`: the server refused the newest question. */
export type SolutionStatus = 'idle' | 'asking' | 'waiting' | 'failed'

export interface Refusal {
  message: string
  issues: Issue[]
}

/** The server's newest answers about the loop on the bench. Nothing of this is saved or shared. */
export const useSolutionStore = defineStore('solution', () => {
  const solution = shallowRef<SolveAnswer | null>(null)
  const analysis = shallowRef<LoopAnalysis | null>(null)
  const solveState = ref<AskingState>('idle')
  const solveRefusal = shallowRef<Refusal | null>(null)
  const analyzeRefusal = shallowRef<Refusal | null>(null)
  /** Fields whose text is not a figure (yet), by path: the server is not asked about those. */
  const fieldIssues = shallowRef<Readonly<Record<string, string>>>({})
  /** Numbers of the answers shown; an answer with a smaller one is dropped. */
  let solveShown = 0
  let analyzeShown = 0

  const solving = newestWaits<SolveQuestion, SolveAnswer>({
    ask: (question, signal) => askServer('/api/design/solve', question, signal),
    onAnswer: (answer, _question, sequence) => receiveSolution(answer, sequence),
    onRefusal: (refusal, _question, sequence) => refuseSolution(refusal, sequence),
    onState: (state) => { solveState.value = state },
  })
  const analyzing = newestWaits<AnalyzeQuestion, LoopAnalysis>({
    ask: (question, signal) => askServer('/api/loop/analyze', question, signal),
    onAnswer: (answer, _question, sequence) => receiveAnalysis(answer, sequence),
    onRefusal: (refusal, _question, sequence) => {
      if (sequence > analyzeShown) analyzeRefusal.value = toRefusal(refusal)
    },
    onState: () => {},
  })

  const status = computed<SolutionStatus>(() =>
    solveState.value === 'waiting' ? 'waiting' : solveRefusal.value ? 'failed' : solveState.value)
  const issues = computed<Issue[]>(() => solveRefusal.value?.issues ?? analyzeRefusal.value?.issues ?? [])
  const message = computed(() => solveRefusal.value?.message ?? analyzeRefusal.value?.message ?? null)
  /** The design shown is the last good one, not that of what is typed now. */
  const stale = computed(() => solution.value !== null
    && (status.value === 'waiting' || status.value === 'failed' || Object.keys(fieldIssues.value).length > 0))

  function receiveSolution(answer: SolveAnswer, sequence: number) {
    if (sequence <= solveShown) return
    solveShown = sequence
    solution.value = markRaw(answer)
    solveRefusal.value = null
  }

  function refuseSolution(refusal: RefusedError, sequence: number) {
    if (sequence <= solveShown) return
    solveShown = sequence
    solveRefusal.value = toRefusal(refusal)
  }

  function receiveAnalysis(answer: LoopAnalysis, sequence: number) {
    if (sequence <= analyzeShown) return
    analyzeShown = sequence
    analysis.value = markRaw(answer)
    analyzeRefusal.value = null
  }

  /** Where given gains put the loop. Stands beside the questions of the drag and changes nothing shown. */
  async function evaluateGains(question: Omit<SolveQuestion, 'designPoint' | 'gains'>, gains: Gains): Promise<DesignSolution | Refusal> {
    try {
      return await askServer<DesignSolution>('/api/design/solve', { ...question, gains })
    }
    catch (error) {
      if (error instanceof RefusedError) return toRefusal(error)
      return { message: 'The server does not answer. Nothing was changed; try again.', issues: [] }
    }
  }

  /** What the server says about a field or anything within it. */
  function issueAt(path: string): Issue | null {
    const local = fieldIssues.value[path]
    if (local !== undefined) return { path, message: local }
    return issues.value.find(issue => issue.path === path || issue.path.startsWith(`${path}.`)) ?? null
  }

  /** A field says that its text is no figure, or (null) that it is one again. */
  function reportField(path: string, problem: string | null) {
    if ((fieldIssues.value[path] ?? null) === problem) return
    const others = Object.entries(fieldIssues.value).filter(([other]) => other !== path)
    fieldIssues.value = Object.fromEntries(problem === null ? others : [...others, [path, problem]])
  }

  /** Forgets everything, for another scenario. */
  function clear() {
    solving.stop()
    analyzing.stop()
    solution.value = null
    analysis.value = null
    solveRefusal.value = null
    analyzeRefusal.value = null
    fieldIssues.value = {}
  }

  return {
    solution, analysis, solveState, solveRefusal, analyzeRefusal, fieldIssues,
    status, issues, message, stale,
    solve: solving.submit, analyze: analyzing.submit, evaluateGains, issueAt, reportField, clear,
  }
})

function toRefusal(error: RefusedError): Refusal {
  const body = error.body as ErrorBody | null
  return { message: error.message, issues: body?.data?.issues ?? [] }
}
