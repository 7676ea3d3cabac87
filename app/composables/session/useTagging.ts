import { computed, ref, shallowRef } from 'vue'
import type { ChapterView } from '#shared/types/session'
import { type Edit, inkedInTheWay, ink, join, mark, moveEdge, nextOf, remove, retag, split, type Tag } from '#shared/utils/chapters/edits'
import { nearlyCertain } from '#shared/utils/chapters/confidence'
import { lengthWords } from '#shared/utils/chapters/words'
import { formatClock } from '#shared/utils/timecode'
import type { Player } from '../player/usePlayer'
import type { ChapterEdits } from './useChapterEdits'
import type { MarkedRange, SessionMarks } from './useMarks'

/** What the picker is open for: a stretch to be marked, or a chapter to be told anew. */
export type Picking = { kind: 'mark', range: MarkedRange } | { kind: 'retag', chapter: ChapterView }

interface Input { player: Player, edits: ChapterEdits, marks: SessionMarks, buildId: () => string, say: (words: string) => void }

const newId = () => crypto.randomUUID()

/** Everything that is done to chapters, by key, button, picker or ribband. */
export function useTagging({ player, edits, marks, buildId, say }: Input) {
  const { confirm } = useConfirm()
  const { notice } = useNotices()
  const picked = usePicked()
  const picking = shallowRef<Picking | null>(null)
  const selectedId = ref<string | null>(null)
  const selected = computed(() => edits.chapters.value.find(one => one.id === selectedId.value) ?? null)

  /** Chapters in the order of the session's clock. */
  const inOrder = computed(() => {
    const start = new Map(player.placed.value.map(clip => [clip.id, clip.startMs]))
    return edits.chapters.value
      .filter(one => start.has(one.clipId))
      .map(chapter => ({ chapter, startMs: start.get(chapter.clipId)! + chapter.startMs, endMs: start.get(chapter.clipId)! + chapter.endMs }))
      .sort((a, b) => a.startMs - b.startMs)
  })
  /** The chapter under the playhead. */
  const here = computed(() => edits.chapters.value.find(one => one.clipId === player.clipId.value && one.startMs <= player.clipMs.value && player.clipMs.value < one.endMs) ?? null)
  /** What a key acts on: the one selected, else the one under the playhead. */
  const subject = computed(() => selected.value ?? here.value)
  /** The subject, if whoever asks may change it. */
  const changeable = computed(() => subject.value && edits.mayBeChanged(subject.value) ? subject.value : null)

  /** Runs an edit and says what it did, unless it would change what somebody else has inked. */
  async function attempt(edit: Edit, label: string, words: string): Promise<boolean> {
    if (refused(edit)) return false
    say(words)
    return edits.run({ ...edit, label })
  }
  function refused(edit: Pick<Edit, 'put' | 'remove'>): boolean {
    const why = edits.refusal(edit)
    if (why) notice({ kind: 'note', text: why })
    return why !== null
  }

  function open(range?: MarkedRange): void {
    const stretch = range ?? marks.range.value
    if (stretch) {
      // Told before anything is chosen, not after.
      if (refused({ put: [], remove: inkedInTheWay(edits.chapters.value, stretch.clipId, stretch.startMs, stretch.endMs) })) return
      player.pause()
      picking.value = { kind: 'mark', range: stretch }
    }
    else if (subject.value) {
      if (refused(remove(subject.value))) return
      player.pause()
      selectedId.value = subject.value.id
      picking.value = { kind: 'retag', chapter: subject.value }
    }
    else {
      notice({ kind: 'note', text: 'Set an in point (I) and an out point (O) first, select words in the transcript, or choose a chapter.' })
    }
  }

  async function finish(tag: Tag): Promise<void> {
    const asked = picking.value
    picking.value = null
    if (!asked) return
    picked.remember(buildId(), tag.stepId, tag.operation)
    if (asked.kind === 'retag') return change(asked.chapter, tag)
    const { clipId, startMs, endMs } = asked.range
    const inTheWay = inkedInTheWay(edits.chapters.value, clipId, startMs, endMs)
    if (inTheWay.length && !await confirm({
      title: inTheWay.length === 1 ? 'Mark over an inked chapter?' : `Mark over ${inTheWay.length} inked chapters?`,
      message: `${inTheWay.slice(0, 3).map(edits.nameOf).join('; ')}${inTheWay.length > 3 ? ' and more' : ''}: what lies under the new chapter is cut away. It can be undone.`,
      action: 'Mark over it', danger: false,
    })) return
    const edit = mark(edits.chapters.value, clipId, startMs, endMs, tag, newId)
    if (refused(edit)) return
    marks.clear()
    selectedId.value = edit.put.at(-1)!.id
    await attempt(edit, `Mark ${edits.nameOf(tag)}`, `Chapter marked: ${edits.nameOf(tag)}, ${lengthWords(endMs - startMs)}`)
  }

  async function change(chapter: ChapterView, tag: Partial<Tag> & { note?: string }): Promise<void> {
    // Its newest state: it may have been moved while the picker was open.
    const now = edits.chapters.value.find(one => one.id === chapter.id) ?? chapter
    const edit = retag(now, tag)
    if (tag.note === undefined) await attempt(edit, `Retag as ${edits.nameOf(edit.put[0]!)}`, `Chapter is now ${edits.nameOf(edit.put[0]!)}`)
    else await attempt(edit, 'Change note', 'Note kept')
  }

  function leave(): void {
    picking.value = null
  }

  function select(id: string | null): void {
    selectedId.value = id
  }
  /** Goes to a moment of a chapter's clip, the chapter staying the chosen one. */
  function seek(chapter: ChapterView, atMs: number): void {
    selectedId.value = chapter.id
    player.enter(chapter.clipId, atMs)
  }
  /** Goes to a chapter and selects it. */
  function visit(id: string): void {
    selectedId.value = id
    const chapter = selected.value
    if (!chapter) return
    player.enter(chapter.clipId, chapter.startMs)
    say(`${edits.nameOf(chapter)}, ${chapter.inking}, ${lengthWords(chapter.endMs - chapter.startMs)}`)
  }
  function step(by: 1 | -1): void {
    const list = inOrder.value
    const at = list.findIndex(one => one.chapter.id === selectedId.value)
    const next = at >= 0 ? list[at + by] : by > 0 ? list.find(one => one.startMs >= player.atMs.value) ?? list.at(-1) : [...list].reverse().find(one => one.startMs <= player.atMs.value) ?? list[0]
    if (next) visit(next.chapter.id)
    else if (!list.length) say('No chapters yet')
  }

  /** Runs what needs a chapter, or says that there is none. */
  function withSubject(what: string, act: (chapter: ChapterView) => unknown): void {
    if (subject.value) act(subject.value)
    else notice({ kind: 'note', text: `There is no chapter here to ${what}. Choose one first.` })
  }
  const splitHere = () => withSubject('split', (chapter) => {
    const edit = chapter.clipId === player.clipId.value ? split(chapter, Math.round(player.clipMs.value), newId) : null
    if (!edit) return notice({ kind: 'note', text: 'Put the playhead inside the chapter, away from its ends, to split it there.' })
    if (refused(edit)) return
    selectedId.value = edit.put[1]!.id
    void attempt(edit, `Split ${edits.nameOf(chapter)}`, `Split at ${formatClock(player.atMs.value, { tenths: true })}`)
  })
  const joinNext = () => withSubject('join', async (chapter) => {
    const next = nextOf(edits.chapters.value, chapter)
    const edit = join(edits.chapters.value, chapter)
    if (!next || !edit) return notice({ kind: 'note', text: 'This is the last chapter of its clip: there is none to join it with.' })
    if (refused(edit)) return
    const gap = next.startMs - chapter.endMs
    const differs = next.inking === 'inked' && (next.stepId !== chapter.stepId || next.operation !== chapter.operation)
    if ((gap > 10_000 || differs) && !await confirm({ title: 'Join with the next chapter?', message: `${gap > 10_000 ? `The ${lengthWords(gap)} between them come with it. ` : ''}Both become ${edits.nameOf(chapter)}. It can be undone.`, action: 'Join', danger: false })) return
    void attempt(edit, `Join ${edits.nameOf(chapter)}`, `Joined into ${edits.nameOf(chapter)}`)
  })
  const deleteIt = () => withSubject('delete', async (chapter) => {
    if (refused(remove(chapter))) return
    if (selectedId.value === chapter.id) selectedId.value = null
    if (await attempt(remove(chapter), `Delete ${edits.nameOf(chapter)}`, `Deleted ${edits.nameOf(chapter)}`)) {
      notice({ kind: 'note', text: `Deleted: ${edits.nameOf(chapter)}.`, action: { label: 'Undo', run: edits.undo } })
    }
  })
  const inkIt = () => withSubject('ink', (chapter) => {
    if (chapter.inking === 'inked') return say('This chapter is inked already')
    void attempt(ink([chapter]), `Ink ${edits.nameOf(chapter)}`, `Inked ${edits.nameOf(chapter)}`)
  })
  /** What else the chapter may show, as it was thought when it was proposed; at most three of each. */
  const others = computed(() => subject.value
    ? { steps: subject.value.alternatives.steps.slice(0, 3), operations: subject.value.alternatives.operations.slice(0, 3) }
    : { steps: [], operations: [] })
  const takeStep = (n: number) => withSubject('retag', (chapter) => {
    const other = others.value.steps[n]
    if (!other) return say('There is no other step to choose from here')
    selectedId.value = chapter.id
    // A step is worked on: what showed no work before cannot go on showing none.
    const operation = other.stepId !== null && chapter.operation === 'none' ? others.value.operations.find(one => one.operation !== 'none')?.operation ?? 'plan-talk' : chapter.operation
    void change(chapter, { stepId: other.stepId, operation })
  })
  const takeOperation = (n: number) => withSubject('retag', (chapter) => {
    const other = others.value.operations[n]
    if (!other) return say('There is no other operation to choose from here')
    selectedId.value = chapter.id
    void change(chapter, { operation: other.operation })
  })
  /** Enter: tags what is marked; else inks what is pencilled and goes on, or opens what is inked to be told anew. */
  async function enter(): Promise<void> {
    const chapter = marks.range.value ? null : changeable.value
    if (chapter?.inking !== 'pencilled') return open()
    const done = attempt(ink([chapter]), `Ink ${edits.nameOf(chapter)}`, `Inked ${edits.nameOf(chapter)}`)
    stepPencilled(1, chapter)
    await done
  }
  /** Goes to the next pencilled chapter, or the one before, from where one is. */
  function stepPencilled(by: 1 | -1, from = subject.value): void {
    const list = inOrder.value
    const at = from ? list.findIndex(one => one.chapter.id === from.id) : by > 0 ? list.findIndex(one => one.startMs >= player.atMs.value) - 1 : list.findIndex(one => one.startMs > player.atMs.value)
    const found = by > 0 ? list.slice(at + 1) : list.slice(0, Math.max(0, at)).reverse()
    const next = found.find(one => one.chapter.inking === 'pencilled')
    if (next) visit(next.chapter.id)
    else say(pencilled.value.length ? `No pencilled chapter ${by > 0 ? 'after' : 'before'} this one` : 'Everything is inked')
  }
  const pencilled = computed(() => edits.chapters.value.filter(one => one.inking === 'pencilled'))
  async function inkAll(): Promise<void> {
    const list = pencilled.value
    if (list.length && await confirm({ title: `Ink ${list.length === 1 ? 'one chapter' : `${list.length} chapters`}?`, message: 'You say that they are right as proposed. Inked chapters can be published. It can be undone.', action: 'Ink all', danger: false })) await edits.run(ink(list))
  }

  const certain = computed(() => nearlyCertain(pencilled.value))
  async function inkCertain(): Promise<void> {
    const list = certain.value
    if (!list.length) return
    const edit = ink(list)
    if (await attempt(edit, edit.label, `Inked ${list.length} ${list.length === 1 ? 'chapter' : 'chapters'}`)) {
      notice({ kind: 'good', text: `${list.length === 1 ? '1 chapter is' : `${list.length} chapters are`} inked.`, action: { label: 'Undo', run: edits.undo } })
    }
  }

  function edgeTo(chapter: ChapterView, edge: 'start' | 'end', clipMs: number, words: string): void {
    const clip = player.placed.value.find(one => one.id === chapter.clipId)
    if (refused(remove(chapter))) return
    const edit = clip && moveEdge(edits.chapters.value, chapter, edge, clipMs, clip.endMs - clip.startMs, edits.mayBeChanged)
    if (edit) void attempt(edit, `Move an edge of ${edits.nameOf(chapter)}`, words)
  }
  function moveEdgeOf(id: string, edge: 'start' | 'end', clipMs: number): void {
    const chapter = edits.chapters.value.find(one => one.id === id)
    if (chapter) edgeTo(chapter, edge, clipMs, 'Edge moved')
  }
  const edgeHere = (edge: 'start' | 'end') => withSubject('trim', (chapter) => {
    const ms = Math.round(player.clipMs.value)
    if (chapter.clipId !== player.clipId.value || (edge === 'start' ? ms >= chapter.endMs : ms <= chapter.startMs)) return notice({ kind: 'note', text: 'The playhead is not on this chapter’s footage, or on the wrong side of it.' })
    edgeTo(chapter, edge, ms, `Chapter ${edge === 'start' ? 'begins' : 'ends'} here now`)
  })

  return { picking, selectedId, selected, here, subject, changeable, mayBeChanged: edits.mayBeChanged, inOrder, pencilled, certain, others, enter, stepPencilled, takeStep, takeOperation, inkCertain, open, finish, leave, change, select, seek, visit, step, splitHere, joinNext, deleteIt, inkIt, inkAll, moveEdgeOf, edgeHere }
}

export type Tagging = ReturnType<typeof useTagging>
