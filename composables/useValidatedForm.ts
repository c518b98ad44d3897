import type { z } from 'zod'

/**
 * A form that validates as the server does: the same schema, loaded at the first submit so that no page carries it up front.
 * What was typed stays on every failure; each message stands at its field, the rest in `failure`. The first field with an error gets the focus,
 * so that it is also heard.
 */
export function useValidatedForm<S extends z.ZodType>(options: {
  initial: () => z.input<S> & object
  schema: () => Promise<S>
  submit: (body: z.output<S>) => Promise<void>
}) {
  const values = reactive(options.initial())
  const errors = ref<Record<string, string>>({})
  const failure = ref<string | null>(null)
  const busy = ref(false)

  async function check(): Promise<z.output<S> | null> {
    const result = (await options.schema()).safeParse(toRaw(values))
    if (result.success) return result.data
    errors.value = messagesByPath(result.error.issues.map(issue => ({ path: issue.path.join('.'), message: issue.message })))
    return null
  }

  function showFailure(thrown: unknown) {
    const failed = readFailure(thrown)
    errors.value = messagesByPath(failed.issues.filter(issue => issue.path in values))
    failure.value = Object.keys(errors.value).length > 0 ? null : failed.message
  }

  async function focusFirstError(form: HTMLFormElement) {
    await nextTick()
    form.querySelector<HTMLElement>('[aria-invalid="true"]')?.focus()
  }

  /** Answers whether it was sent and accepted. The event is that of the form. */
  async function submit(event: Event): Promise<boolean> {
    if (busy.value) return false
    const form = event.target as HTMLFormElement
    busy.value = true
    errors.value = {}
    failure.value = null
    let accepted = false
    try {
      const body = await check()
      if (body !== null) {
        await options.submit(body)
        accepted = true
      }
    } catch (thrown) {
      showFailure(thrown)
    } finally {
      busy.value = false
    }
    if (!accepted) await focusFirstError(form)
    return accepted
  }

  function reset() {
    Object.assign(values, options.initial())
    errors.value = {}
    failure.value = null
  }

  return { values, errors, failure, busy, submit, reset }
}
