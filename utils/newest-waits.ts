/** A definite no of the server: the question itself is at fault, asking again would not help. */
export class RefusedError<Body = unknown> extends Error {
  constructor(readonly body: Body, message: string) {
    super(message)
    this.name = 'RefusedError'
  }
}

/** `waiting`: the answer is late or the server is gone; what is shown is older than the newest question. */
export type AskingState = 'idle' | 'asking' | 'waiting'

export interface NewestWaitsOptions<Question, Answer> {
  ask: (question: Question, signal: AbortSignal) => Promise<Answer>
  onAnswer: (answer: Answer, question: Question, sequence: number) => void
  onRefusal: (refusal: RefusedError, question: Question, sequence: number) => void
  onState: (state: AskingState) => void
  /** Milliseconds after which an answer counts as late. */
  slowAfter?: number
  /** Milliseconds after which an attempt is given up and made again. */
  giveUpAfter?: number
  /** Milliseconds to pause before attempt 2, 3, ...; the last one repeats. */
  pauses?: readonly number[]
}

export interface NewestWaits<Question> {
  /** `outdates`: the answer under way is worthless now and is aborted. Otherwise it is awaited, and only the newest question waits behind it. */
  submit: (question: Question, outdates?: boolean) => void
  stop: () => void
}

interface Run<Question> {
  question: Question
  sequence: number
  abort: AbortController
  askedAt: number
}

/**
 * One question under way, the newest waits, all between are dropped. Answers are numbered in the order asked; an aborted run never reports.
 * Failures that are not refusals (no connection, 5xx, too many requests) are asked again, always with the newest question.
 */
export function newestWaits<Question, Answer>(options: NewestWaitsOptions<Question, Answer>): NewestWaits<Question> {
  const { slowAfter = 300, giveUpAfter = 8000, pauses = [400, 1000, 2000, 4000] } = options
  let sequence = 0
  let underWay: Run<Question> | null = null
  let next: { question: Question } | null = null
  let failures = 0
  let state: AskingState = 'idle'
  let slowTimer: ReturnType<typeof setTimeout> | undefined
  let giveUpTimer: ReturnType<typeof setTimeout> | undefined
  let pauseTimer: ReturnType<typeof setTimeout> | undefined

  function enter(wanted: AskingState) {
    if (wanted === state) return
    state = wanted
    options.onState(state)
  }

  function finish() {
    clearTimeout(slowTimer)
    clearTimeout(giveUpTimer)
    underWay = null
  }

  function send() {
    pauseTimer = undefined
    if (!next) return
    const run: Run<Question> = { question: next.question, sequence: ++sequence, abort: new AbortController(), askedAt: Date.now() }
    next = null
    underWay = run
    if (state !== 'waiting') enter('asking')
    slowTimer = setTimeout(() => enter('waiting'), slowAfter)
    giveUpTimer = setTimeout(() => {
      run.abort.abort()
      failed(run, new Error('no answer in time'))
    }, giveUpAfter)
    options.ask(run.question, run.abort.signal).then(answer => answered(run, answer), error => failed(run, error))
  }

  function answered(run: Run<Question>, answer: Answer) {
    if (run !== underWay) return
    finish()
    failures = 0
    options.onAnswer(answer, run.question, run.sequence)
    // A late answer to an older question leaves the figures old: the newest one is still awaited.
    const late = Date.now() - run.askedAt >= slowAfter
    enter(next === null ? 'idle' : late ? 'waiting' : 'asking')
    send()
  }

  function failed(run: Run<Question>, error: unknown) {
    if (run !== underWay) return
    finish()
    if (error instanceof RefusedError) {
      failures = 0
      if (!next) options.onRefusal(error, run.question, run.sequence)
      enter(next ? 'asking' : 'idle')
      send()
      return
    }
    next ??= { question: run.question }
    enter('waiting')
    pauseTimer = setTimeout(send, pauses[Math.min(failures, pauses.length - 1)])
    failures++
  }

  return {
    submit(question, outdates = false) {
      next = { question }
      if (underWay && outdates) {
        const { abort } = underWay
        finish()
        abort.abort()
      }
      if (!underWay && pauseTimer === undefined) send()
    },
    stop() {
      const run = underWay
      finish()
      clearTimeout(pauseTimer)
      pauseTimer = undefined
      next = null
      run?.abort.abort()
      enter('idle')
    },
  }
}
