import { defineStore } from 'pinia'
import { useLocalStorage } from '@vueuse/core'
import type { Operation } from '#shared/types/trade'

interface Picked { steps: string[], operations: Record<string, Operation> }

const MOST_STEPS = 12
const MOST_BUILDS = 20

/** Steps that were picked lately, build by build, and the operation last used with each. Kept in this browser. */
export const usePicked = defineStore('picked', () => {
  const builds = useLocalStorage<Record<string, Picked>>('ribband-picked', {}, { initOnMounted: true })

  const of = (buildId: string): Picked => builds.value[buildId] ?? { steps: [], operations: {} }

  function remember(buildId: string, stepId: string | null, operation: Operation): void {
    if (stepId === null) return
    const { steps, operations } = of(buildId)
    const kept = [stepId, ...steps.filter(id => id !== stepId)].slice(0, MOST_STEPS)
    const next: Picked = { steps: kept, operations: Object.fromEntries(kept.map(id => [id, id === stepId ? operation : operations[id]!])) }
    builds.value = Object.fromEntries([[buildId, next] as const, ...Object.entries(builds.value).filter(([id]) => id !== buildId)].slice(0, MOST_BUILDS))
  }

  return { of, remember }
})
