import { computed, ref, shallowRef } from 'vue'
import { useDebounceFn } from '@vueuse/core'
import type { StepView } from '#shared/types/plan'
import type { ChapterView } from '#shared/types/session'
import { apply, type Edit } from '#shared/utils/chapters/edits'
import { alreadyDone, type Changed, cuttingBack, overTheirs } from '#shared/utils/chapters/conflicts'
import { asChanges, doneWith, type Done, merge, onTopOf, type Outcome, restamp, takeBack, touchedBy } from '#shared/utils/chapters/history'
import { forbiddenIn, forbiddenWords, type Hand, mayChange } from '#shared/utils/chapters/rights'
import { realignedWords } from '#shared/utils/chapters/realigned'
import { changeWords, chapterName } from '#shared/utils/chapters/words'

type Kind = 'do' | 'undo' | 'redo'
interface Waiting { edit: Edit, kind: Kind, reversed?: Done, answer: (saved: boolean) => void }

/** An edit that somebody else's work stands in the way of; the person chooses. */
export type Conflict = { waiting: Waiting, problem: string } & ({ reason: 'changed', changed: Changed } | { reason: 'overlap', inTheWay: ChapterView[] })

interface Input {
  sessionId: string
  me: () => Hand
  steps: () => StepView[]
  /** For the live region. */
  say: (words: string) => void
}

const GATHER_MS = 60

/**
 * The chapters of a session as the page shows them: what the server has, with edits that are on their way already
 * drawn. Edits go one after the other; each can be undone; other people's come in by themselves.
 */
export function useChapterEdits({ sessionId, me, steps, say }: Input) {
  const api = useApi()
  const { notice } = useNotices()
  const { data, error, refresh } = useApiData<{ chapters: ChapterView[] }>(`chapters:${sessionId}`, () => `/api/sessions/${sessionId}/chapters`)
  const base = computed(() => data.value?.chapters ?? [])
  const queue = shallowRef<Waiting[]>([])
  const chapters = computed(() => queue.value.reduce((list, one) => apply(list, one.edit), base.value))
  const conflict = shallowRef<Conflict | null>(null)
  /** Edits that could not be sent; kept for another try. */
  const unsent = shallowRef<Edit[]>([])
  const undoable = shallowRef<Done[]>([])
  const redoable = shallowRef<Done[]>([])
  /** The last thing that somebody else did. */
  const news = ref('')
  /** Undo and redo that were asked for while something was on its way. */
  const later: ('undo' | 'redo')[] = []
  let sending = false
  let settled = 0

  function run(edit: Edit): Promise<boolean> {
    return enqueue(edit, 'do')
  }
  function enqueue(edit: Edit, kind: Kind, reversed?: Done): Promise<boolean> {
    return new Promise((answer) => {
      queue.value = [...queue.value, { edit, kind, reversed, answer }]
      void send()
    })
  }

  async function send(): Promise<void> {
    const first = queue.value[0]
    if (sending || conflict.value) return
    if (!first) {
      const kind = later.shift()
      if (kind) void reverse(kind)
      return
    }
    sending = true
    try {
      const before = touchedBy(first.edit, base.value)
      settle(first, before, await api<Outcome>(`/api/sessions/${sessionId}/chapters`, { method: 'POST', body: asChanges(first.edit) }))
    }
    catch (problem) {
      refuse(first, asProblem(problem))
    }
    finally {
      sending = false
    }
    if (heardMeanwhile) void rereadSoon()
    void send()
  }

  function settle(one: Waiting, before: ChapterView[], outcome: Outcome): void {
    settled++
    const stood = base.value
    data.value = { chapters: merge(stood, outcome) }
    // Held against the chapters with the edit in them: what the person did is not told them again.
    tellRealigned(merge(stood, { ...outcome, realigned: null }), base.value)
    queue.value = queue.value.filter(other => other !== one).map(other => ({ ...other, edit: onTopOf(other.edit, one.edit, outcome) }))
    const done = doneWith(one.edit, before, outcome)
    if (one.kind === 'do') {
      undoable.value = [...undoable.value, done].slice(-100)
      redoable.value = []
    }
    else if (one.kind === 'undo') {
      undoable.value = restamp(undoable.value, one.reversed!, done)
      redoable.value = [...redoable.value, done]
    }
    else {
      redoable.value = restamp(redoable.value, one.reversed!, done)
      undoable.value = [...undoable.value, done]
    }
    one.answer(true)
  }

  /** Says what the program now proposes otherwise. */
  function tellRealigned(before: readonly ChapterView[], after: readonly ChapterView[]): void {
    const words = realignedWords(before, after, steps())
    if (!words) return
    news.value = `Aligned anew: ${words}.`
    say(`${words}.`)
  }

  function drop(one: Waiting): void {
    queue.value = queue.value.filter(other => other !== one)
    // What was to be undone after it is no longer what they had in mind.
    later.length = 0
    one.answer(false)
  }

  function refuse(one: Waiting, problem: ApiProblem): void {
    if (problem.code === 'conflict' && problem.data.reason === 'changed') {
      const changed = { current: problem.data.current as ChapterView[], gone: problem.data.gone as string[] }
      if (alreadyDone(one.edit, changed)) {
        settle(one, touchedBy(one.edit, base.value), { chapters: changed.current, removed: one.edit.remove.map(gone => gone.id) })
        return
      }
      data.value = { chapters: merge(base.value, { chapters: changed.current, removed: changed.gone }) }
      if (one.kind !== 'do') {
        drop(one)
        notice({ kind: 'note', text: 'This cannot be undone: somebody has changed the chapter since. It stays as it is.' })
        return
      }
      conflict.value = { waiting: one, problem: problem.message, reason: 'changed', changed }
      return
    }
    if (problem.code === 'conflict' && problem.data.reason === 'overlap') {
      conflict.value = { waiting: one, problem: problem.message, reason: 'overlap', inTheWay: problem.data.with as ChapterView[] }
      void reread()
      return
    }
    drop(one)
    if (one.kind === 'undo') undoable.value = [...undoable.value, one.reversed!]
    else if (one.kind === 'redo') redoable.value = [...redoable.value, one.reversed!]
    else if (problem.status === 0 || problem.status >= 500) {
      unsent.value = [...unsent.value, one.edit]
      say(`Not saved: ${one.edit.label}. It is kept for another try.`)
      return
    }
    notice({ kind: 'bad', text: problem.message })
    void reread()
  }

  /** The person's choice in a conflict: their own over the others', or not. */
  function resolve(mine: boolean): void {
    const asked = conflict.value
    if (!asked) return
    conflict.value = null
    if (!mine) {
      drop(asked.waiting)
      say('Kept as the other person left it.')
    }
    else {
      const edit = asked.reason === 'changed' ? overTheirs(asked.waiting.edit, asked.changed) : cuttingBack(asked.waiting.edit, asked.inTheWay, () => crypto.randomUUID())
      queue.value = queue.value.map(one => one === asked.waiting ? { ...one, edit } : one)
    }
    void send()
  }

  async function tryAgain(): Promise<void> {
    const again = unsent.value
    unsent.value = []
    await Promise.all(again.map(run))
  }
  function forgetUnsent(): void {
    unsent.value = []
  }

  async function reverse(kind: 'undo' | 'redo'): Promise<void> {
    // What is still on its way has no versions yet: taken back as soon as it has.
    if (queue.value.length) return void later.push(kind)
    const stack = kind === 'undo' ? undoable : redoable
    const done = stack.value.at(-1)
    if (!done) return void say(kind === 'undo' ? 'Nothing to undo.' : 'Nothing to redo.')
    stack.value = stack.value.slice(0, -1)
    const edit = takeBack(done, base.value)
    if (!edit) {
      notice({ kind: 'note', text: `“${done.edit.label}” cannot be ${kind === 'undo' ? 'undone' : 'redone'}: somebody has changed the chapter since. It stays as it is.` })
      return
    }
    if (await enqueue(edit, kind, done)) say(`${kind === 'undo' ? 'Undone' : 'Redone'}: ${done.edit.label}.`)
  }

  const heard = new Set<string>()
  /** Something was heard while an edit was on its way: read again when it has been answered. */
  let heardMeanwhile = false
  async function reread(): Promise<void> {
    const at = settled
    heardMeanwhile = false
    try {
      const fresh = await api<{ chapters: ChapterView[] }>(`/api/sessions/${sessionId}/chapters`)
      // An own edit came through meanwhile: this answer may be from before it.
      if (sending) return void (heardMeanwhile = true)
      if (at !== settled) return void rereadSoon()
      const words = changeWords(base.value, fresh.chapters, heard, steps())
      heard.clear()
      const stood = base.value
      data.value = fresh
      if (words) {
        news.value = words
        say(words)
      }
      else {
        tellRealigned(stood, fresh.chapters)
      }
    }
    catch {
      // The live line says when the site cannot be reached, and everything is read again when it can.
    }
  }
  const rereadSoon = useDebounceFn(() => reread(), GATHER_MS, { maxWait: 600 })

  /** Somebody, perhaps in another window of one's own, changed a chapter. */
  function hear(event: { id: string, by?: string | null }): void {
    if (event.by !== me().id) heard.add(event.id)
    void rereadSoon()
  }

  /** By the chapter as the server has it: what is still on its way is one's own. */
  function mayBeChanged(chapter: Pick<ChapterView, 'id'>): boolean {
    const kept = base.value.find(one => one.id === chapter.id)
    return !kept || mayChange(kept, me())
  }
  /** Why an edit would be refused for whose chapters it changes; null when it would not. */
  function refusal(edit: Pick<Edit, 'put' | 'remove'>): string | null {
    const [other] = forbiddenIn(edit, base.value, me())
    return other ? forbiddenWords(other) : null
  }

  return {
    chapters, error, refresh, conflict, unsent, news,
    saving: computed(() => queue.value.length > 0),
    undoLabel: computed(() => undoable.value.at(-1)?.edit.label ?? null),
    redoLabel: computed(() => redoable.value.at(-1)?.edit.label ?? null),
    run, undo: () => reverse('undo'), redo: () => reverse('redo'), resolve, tryAgain, forgetUnsent, hear, rereadSoon, mayBeChanged, refusal,
    nameOf: (chapter: Pick<ChapterView, 'stepId' | 'operation'>) => chapterName(chapter, steps()),
  }
}

export type ChapterEdits = ReturnType<typeof useChapterEdits>
