import type { MomentGroup, MomentHit, SearchAnswer } from '#shared/types/search'
import { OPERATIONS, type Operation } from '#shared/types/trade'

export interface SearchFilters { session: string, step: string, part: string, operation: Operation | '', from: string, to: string }

/**
 * A search kept in the page's address: the question and its filters, the answer, and further pages of it.
 * The first page is part of the page as the server sends it.
 */
export async function useSearch(build: () => string | null) {
  const route = useRoute()
  const api = useApi()
  const read = (name: string) => String(([] as unknown[]).concat(route.query[name] ?? '')[0] ?? '')
  const question = computed(() => read('q').slice(0, 300))
  const filters = computed<SearchFilters>(() => ({
    session: read('session'), step: read('step'), part: read('part'), operation: OPERATIONS.find(one => one === read('operation')) ?? '', from: read('from'), to: read('to'),
  }))
  const asked = computed(() => question.value !== '' || filters.value.step !== '' || filters.value.part !== '' || filters.value.operation !== '')
  const query = (after?: string) => ({ q: question.value, build: build() ?? undefined, ...filters.value, after })

  const { data, error, status, refresh } = await useAsyncData<SearchAnswer | null>(
    () => `search:${build()}:${JSON.stringify(route.query)}`,
    async () => {
      if (!asked.value) return null
      try {
        return await api<SearchAnswer>('/api/search', { query: query() })
      }
      catch (failure) {
        const problem = asProblem(failure)
        throw createError({ statusCode: problem.status || 503, message: problem.message, data: { code: problem.code, message: problem.message } })
      }
    },
    { watch: [() => route.fullPath] },
  )

  const further = ref<SearchAnswer[]>([])
  const loadingMore = ref(false)
  watch(data, () => further.value = [])
  const next = computed(() => (further.value.at(-1) ?? data.value)?.next ?? null)
  async function more() {
    if (!next.value || loadingMore.value) return
    loadingMore.value = true
    try {
      further.value = [...further.value, await api<SearchAnswer>('/api/search', { query: query(next.value) })]
    }
    finally {
      loadingMore.value = false
    }
  }

  /** Steps keep the place of their best moment; moments of later pages join their step. */
  const groups = computed<MomentGroup[]>(() => {
    const merged = new Map<string, MomentGroup>()
    for (const group of [data.value, ...further.value].flatMap(answer => answer?.groups ?? [])) {
      const key = `${group.build.id} ${group.step?.id}`
      const known = merged.get(key)
      merged.set(key, known ? { ...known, moments: [...known.moments, ...group.moments] } : group)
    }
    return [...merged.values()]
  })
  const moments = computed<MomentHit[]>(() => groups.value.flatMap(group => group.moments))

  /** Asks anew; anything left empty is left out of the address. */
  function ask(changes: Partial<SearchFilters & { q: string }>) {
    const wanted = { q: question.value, ...filters.value, ...changes }
    return navigateTo({ path: route.path, query: Object.fromEntries(Object.entries(wanted).filter(([, value]) => value !== '')) }, { replace: asked.value && changes.q === undefined })
  }
  return { question, filters, asked, answer: data, error, status, refresh, groups, moments, next, more, loadingMore, ask }
}
