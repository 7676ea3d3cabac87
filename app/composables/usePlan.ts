import type { ChangePart, ChangeStep, NewPart, NewStep } from '#shared/schemas/plan'
import type { PartView, PlanView, StepView } from '#shared/types/plan'

/** A build's steps and parts, and every way to change them. What the server answers is what the page shows. */
export function usePlan(buildId: string) {
  const api = useApi()
  const { notice } = useNotices()
  const loaded = useApiData<PlanView>(`plan:${buildId}`, () => `/api/builds/${buildId}/plan`, { fatal: true })
  const plan = loaded.data as Ref<PlanView | undefined>
  const allSteps = computed(() => plan.value?.steps ?? [])
  const allParts = computed(() => plan.value?.parts ?? [])
  const steps = computed(() => allSteps.value.filter(step => !step.archived))
  const parts = computed(() => allParts.value.filter(part => !part.archived))

  function put(change: Partial<PlanView>) {
    if (plan.value) plan.value = { ...plan.value, ...change }
  }
  const replace = <Row extends { id: string }>(rows: Row[], row: Row) => rows.map(one => one.id === row.id ? row : one)

  async function changeStep(id: string, change: ChangeStep) {
    const step = await api<StepView>(`/api/steps/${id}`, { method: 'PATCH', body: change })
    put({ steps: replace(allSteps.value, step) })
    return step
  }
  async function addStep(step: Partial<NewStep>) {
    const added = await api<StepView>(`/api/builds/${buildId}/steps`, { method: 'POST', body: step })
    await loaded.refresh()
    return added
  }
  async function orderSteps(ids: string[]) {
    await api(`/api/builds/${buildId}/steps/order`, { method: 'PUT', body: { ids } })
    put({ steps: inOrder(allSteps.value, ids) })
  }
  async function changePart(id: string, change: ChangePart) {
    const part = await api<PartView>(`/api/parts/${id}`, { method: 'PATCH', body: change })
    // A part that comes or goes takes its links to steps with it.
    if (change.archived === undefined) put({ parts: replace(allParts.value, part) })
    else await loaded.refresh()
    return part
  }
  async function addPart(part: Partial<NewPart>) {
    const added = await api<PartView>(`/api/builds/${buildId}/parts`, { method: 'POST', body: part })
    put({ parts: [...allParts.value, added] })
    return added
  }
  async function orderParts(ids: string[]) {
    await api(`/api/builds/${buildId}/parts/order`, { method: 'PUT', body: { ids } })
    put({ parts: inOrder(allParts.value, ids) })
  }

  /** Tells of a failed change; the page still shows what is kept. */
  async function tell(work: () => Promise<unknown>) {
    try {
      await work()
      return true
    }
    catch (error) {
      notice({ kind: 'bad', text: asProblem(error).message })
      await loaded.refresh()
      return false
    }
  }
  async function archiveStep(step: StepView) {
    if (!await tell(() => changeStep(step.id, { archived: true }))) return
    notice({ kind: 'note', text: `Step ${step.number} is archived. Footage tied to it stays.`, action: { label: 'Undo', run: () => tell(() => changeStep(step.id, { archived: false })) } })
  }
  async function archivePart(part: PartView) {
    if (!await tell(() => changePart(part.id, { archived: true }))) return
    notice({ kind: 'note', text: `“${part.name}” is archived.`, action: { label: 'Undo', run: () => tell(() => changePart(part.id, { archived: false })) } })
  }

  return { plan, steps, parts, allSteps, allParts, changeStep, addStep, orderSteps, changePart, addPart, orderParts, archiveStep, archivePart, tell, refresh: loaded.refresh, ready: loaded }
}

/** Rows with `ids` first in that order; the others (archived) stay at the end until the next load. */
function inOrder<Row extends { id: string }>(rows: Row[], ids: string[]): Row[] {
  const place = new Map(ids.map((id, i) => [id, i]))
  return [...rows].sort((a, b) => (place.get(a.id) ?? ids.length) - (place.get(b.id) ?? ids.length))
}
