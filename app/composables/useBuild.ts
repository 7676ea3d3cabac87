import type { BuildView } from '#shared/types/build'

/** The build of this page. `ready` is awaited in the page's set-up; a build that may not be seen ends in the error page. */
export function useBuild() {
  const route = useRoute()
  const id = 'build' in route.params ? String(route.params.build) : ''
  const loaded = useApiData<BuildView>(`build:${id}`, () => `/api/builds/${id}`, { fatal: true })
  const build = loaded.data as Ref<BuildView | undefined>
  /** What only the builder may do: plan, settings, publishing. */
  const mayRun = computed(() => build.value?.role === 'builder')
  const mayWork = computed(() => mayRun.value || build.value?.role === 'crew')
  return { id, build, mayRun, mayWork, error: loaded.error, refresh: loaded.refresh, ready: loaded }
}
