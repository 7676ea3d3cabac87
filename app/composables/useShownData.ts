import type { Ref } from 'vue'

/** A page's one thing, without which there is no page: what cannot be shown ends in the error page, so the page itself always has it. */
export async function useShownData<T>(key: () => string, path: () => string): Promise<Ref<T>> {
  const { data } = await useApiData<T>(key, path, { fatal: true })
  return data as Ref<T>
}
