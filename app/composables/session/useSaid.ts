import { computed, type Ref } from 'vue'
import { useDebounceFn } from '@vueuse/core'
import type { FactChanges, PickupChanges } from '#shared/schemas/facts'
import type { FactView, PickupView } from '#shared/types/facts'

/** What is said of measures and of work off camera: facts and pick-ups of a session, each change with its way back. */
export function useSaid(sessionId: string) {
  const api = useApi()
  const { notice } = useNotices()
  // As with the captions: the browser asks for them itself.
  const options = { lazy: true, server: false }
  const askedFacts = useApiData<{ facts: FactView[] }>(`facts:${sessionId}`, () => `/api/sessions/${sessionId}/facts`, options)
  const askedPickups = useApiData<{ pickups: PickupView[] }>(`pickups:${sessionId}`, () => `/api/sessions/${sessionId}/pickups`, options)
  const facts = computed(() => askedFacts.data.value?.facts ?? [])
  const pickups = computed(() => askedPickups.data.value?.pickups ?? [])
  const reread = useDebounceFn(() => Promise.all([askedFacts.refresh(), askedPickups.refresh()]), 120, { maxWait: 800 })

  /** Sends a change; what comes back takes the old one's place. Somebody else's is shown as it now is. */
  async function send<Row extends { id: string }>(path: string, body: unknown, put: (row: Row) => void): Promise<Row | null> {
    try {
      const row = await api<Row>(path, { method: 'PATCH', body })
      put(row)
      return row
    }
    catch (failure) {
      const problem = asProblem(failure)
      if (problem.data.current) put(problem.data.current as Row)
      notice({ kind: 'bad', text: problem.message })
      return null
    }
  }
  const putIn = <Row extends { id: string }>(list: Ref<Record<string, Row[]> | null | undefined>, name: string) => (row: Row) => {
    if (list.value) list.value = { ...list.value, [name]: list.value[name]!.map(one => one.id === row.id ? row : one) }
  }
  const putFact = putIn<FactView>(askedFacts.data as never, 'facts')
  const putPickup = putIn<PickupView>(askedPickups.data as never, 'pickups')

  type Fields<Changes> = Omit<Changes, 'version'>
  async function changeFact(fact: FactView, changes: Fields<FactChanges>, words: string): Promise<boolean> {
    const changed = await send(`/api/facts/${fact.id}`, { ...changes, version: fact.version }, putFact)
    if (!changed) return false
    // A deleted one is still answered: the page no longer shows it.
    if (changes.dismissed && askedFacts.data.value) askedFacts.data.value = { facts: facts.value.filter(one => one.id !== fact.id) }
    const { inking, value, unit, stepId, proposed } = fact
    notice({ kind: 'note', text: words, action: { label: 'Undo', run: async () => {
      await send(`/api/facts/${fact.id}`, { inking, value, unit, stepId, proposed, dismissed: false, version: changed.version }, putFact)
      await askedFacts.refresh()
    } } })
    return true
  }
  async function changePickup(pickup: PickupView, changes: Fields<PickupChanges>, words: string): Promise<boolean> {
    const changed = await send(`/api/pickups/${pickup.id}`, { ...changes, version: pickup.version }, putPickup)
    if (!changed) return false
    const { state, stepId, proposed } = pickup
    notice({ kind: 'note', text: words, action: { label: 'Undo', run: () => send(`/api/pickups/${pickup.id}`, { state, stepId, proposed, version: changed.version }, putPickup) } })
    return true
  }

  return { facts, pickups, reread, changeFact, changePickup }
}

export type Said = ReturnType<typeof useSaid>
