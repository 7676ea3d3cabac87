import { computed, ref, shallowRef } from 'vue'
import { useDebounceFn } from '@vueuse/core'
import type { CueView, TrackView } from '#shared/types/session'
import { cuesIn, languagesOf } from '#shared/utils/transcript/rows'

/** The captions of a session and their correction in place. */
export function useCaptions(sessionId: string, tracks: () => TrackView[]) {
  const api = useApi()
  const { notice } = useNotices()
  // Thousands of captions would only make the page heavier to send: the browser asks for them itself.
  const { data, error, refresh } = useApiData<{ cues: CueView[] }>(`cues:${sessionId}`, () => `/api/sessions/${sessionId}/cues`, { lazy: true, server: false })
  const all = computed(() => data.value?.cues ?? [])
  const languages = computed(() => languagesOf(tracks()))
  const chosen = ref<string | null>(null)
  const language = computed(() => chosen.value !== null && languages.value.includes(chosen.value) ? chosen.value : languages.value[0] ?? null)
  const cues = computed(() => languages.value.length > 1 ? cuesIn(language.value, all.value, tracks()) : all.value)
  const reread = useDebounceFn(() => refresh(), 200, { maxWait: 1000 })
  /** A correction that somebody else was quicker than. */
  const clash = shallowRef<{ theirs: CueView, mine: string, message: string } | null>(null)

  function forgetClash(): void {
    clash.value = null
  }
  function choose(tag: string | null): void {
    chosen.value = tag
  }

  function put(cue: CueView): void {
    data.value = { cues: all.value.map(one => one.id === cue.id ? cue : one) }
  }

  /** Saves new words and offers the way back; answers what is wrong, or null when it is kept. */
  async function correct(cue: CueView, text: string): Promise<string | null> {
    const wrong = await save(cue, text)
    const changed = all.value.find(one => one.id === cue.id)
    if (wrong === null && changed && changed.text !== cue.text) {
      notice({ kind: 'good', text: changed.edited ? 'The caption is corrected.' : 'The caption has its words as uploaded again.', action: { label: 'Undo', run: () => undo(changed, cue.text) } })
    }
    return wrong
  }

  async function undo(cue: CueView, words: string): Promise<void> {
    const wrong = await save(cue, words)
    // There is no box open beside which the message could stand.
    forgetClash()
    notice(wrong === null ? { kind: 'note', text: 'The caption is as it was before.' } : { kind: 'bad', text: wrong })
  }

  async function save(cue: CueView, text: string): Promise<string | null> {
    clash.value = null
    try {
      put(await api<CueView>(`/api/cues/${cue.id}`, { method: 'PATCH', body: { text, version: cue.version } }))
      return null
    }
    catch (failure) {
      const problem = asProblem(failure)
      const theirs = problem.data.current as CueView | undefined
      if (problem.code === 'conflict' && theirs) {
        put(theirs)
        clash.value = { theirs, mine: text, message: problem.message }
      }
      return problem.issues[0]?.message ?? problem.message
    }
  }

  return { cues, all, languages, language, clash, loading: computed(() => !data.value && !error.value), error, refresh, reread, correct, choose, forgetClash }
}

export type Captions = ReturnType<typeof useCaptions>
