import type { ZodType } from 'zod'

/** What signing in and signing up have in common: who is in already goes on, whoever comes in goes where they were going. */
export async function useEntry(path: '/api/auth/sign-in' | '/api/auth/sign-up', schema: ZodType) {
  const route = useRoute()
  const to = computed(() => ownPath(route.query.to))
  const { account, refresh } = useAccount()
  const api = useApi()
  const form = useForm()
  /** For the link to the other of the two pages. */
  const along = computed(() => route.query.to ? { to: to.value } : {})

  async function enter(values: Record<string, string>): Promise<void> {
    const done = await form.submit(schema, values, async (input) => {
      await api(path, { method: 'POST', body: input })
      await refresh()
      return true
    })
    if (!done) return
    // What the page showed a guest is not what a member sees.
    clearNuxtData()
    await navigateTo(to.value, { replace: true })
  }

  if (account.value) await navigateTo(to.value, { replace: true })
  return { busy: form.busy, issues: form.issues, problem: form.problem, along, enter }
}
