import type { ZodType, output } from 'zod'

/**
 * What a form shows while and after it is sent. Values are held to the same rules as on the server before
 * they travel; what the server refuses comes back to the same fields. Nothing typed is ever cleared.
 */
export function useForm() {
  const busy = ref(false)
  /** What is wrong, by field. */
  const issues = ref<Record<string, string>>({})
  /** What is wrong with the whole, in a sentence. */
  const problem = ref('')

  function show(found: readonly { path: string, message: string }[]) {
    issues.value = Object.fromEntries([...found].reverse().map(issue => [issue.path.split('.')[0]!, issue.message]))
  }

  /** Sends `values` when they keep to `schema`; answers what `send` answers, or undefined when something is wrong. */
  async function submit<Schema extends ZodType, Answer>(schema: Schema, values: unknown, send: (values: output<Schema>) => Promise<Answer>): Promise<Answer | undefined> {
    issues.value = {}
    problem.value = ''
    const checked = schema.safeParse(values)
    if (!checked.success) {
      show(checked.error.issues.map(issue => ({ path: issue.path.join('.'), message: issue.message })))
      problem.value = issues.value[''] ?? ''
      await focusFirstWrong()
      return undefined
    }
    busy.value = true
    try {
      return await send(checked.data)
    }
    catch (error) {
      const failure = asProblem(error)
      show(failure.issues)
      problem.value = failure.message
      return undefined
    }
    finally {
      busy.value = false
    }
  }

  return { busy, issues, problem, submit }
}

async function focusFirstWrong() {
  await nextTick()
  document.querySelector<HTMLElement>('form [aria-invalid="true"]')?.focus()
}
