import type { Holdings } from '#shared/types/holdings'
import { holdingsWords } from '#shared/utils/holdings'

/** What goes with something that is to be deleted, counted when it is asked for: others work on it meanwhile. */
export function useHoldings() {
  const api = useApi()
  /** '2 clips (14 min) and 9 chapters', '' when there is nothing; throws ApiProblem when it cannot be counted. */
  return async (subject: 'builds' | 'sessions' | 'clips', id: string): Promise<string> => holdingsWords(await api<Holdings>(`/api/${subject}/${id}/holdings`))
}
