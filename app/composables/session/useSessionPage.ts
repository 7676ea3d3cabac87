import { computed, onMounted, ref, watch } from 'vue'
import type { PlanView } from '#shared/types/plan'
import { digitOf, type SessionAction } from '~/utils/sessionKeys'
import { usePlayer } from '../player/usePlayer'
import { useCaptions } from './useCaptions'
import { useChapterEdits } from './useChapterEdits'
import { useMarks } from './useMarks'
import { useSaid } from './useSaid'
import { useSessionKeys } from './useSessionKeys'
import { useTagging } from './useTagging'

/** Everything of the session page that is not its layout. */
export function useSessionPage(buildId: string, sessionId: string) {
  const { account } = useAccount()
  const spoken = ref('')
  // The same words twice are said twice: a no-break space makes them other text.
  const say = (words: string) => spoken.value = spoken.value === words ? `${words}\u00a0` : words

  const live = useLiveSession(() => sessionId, {
    onEvent: (event) => {
      if (event.kind === 'chapter') edits.hear(event)
      if (event.kind === 'clip' || event.kind === 'pencil') void edits.rereadSoon()
      if (['pencil', 'fact', 'pickup'].includes(event.kind)) void said.reread()
      if (event.kind === 'captions' || (event.kind === 'task' && event.task?.task === 'read-captions' && event.task.state === 'done')) void captions.reread()
    },
    onGap: () => {
      void edits.rereadSoon()
      void captions.reread()
      void said.reread()
    },
  })
  const plan = useApiData<PlanView>(`plan:${buildId}`, () => `/api/builds/${buildId}/plan`)
  const session = computed(() => live.session.value ?? null)
  const clips = computed(() => session.value?.clips ?? [])
  const steps = computed(() => plan.data.value?.steps ?? [])
  const parts = computed(() => plan.data.value?.parts ?? [])

  const edits = useChapterEdits({ sessionId, me: () => ({ id: account.value?.id, role: session.value?.role ?? null }), steps: () => steps.value, say })
  const captions = useCaptions(sessionId, () => session.value?.tracks ?? [])
  const said = useSaid(sessionId)
  const player = usePlayer(() => clips.value)
  const marks = useMarks(player, { cues: () => captions.cues.value, chapters: () => edits.chapters.value, say })
  const tagging = useTagging({ player, edits, marks, buildId: () => buildId, say })
  const keysOpen = ref(false)

  /** What keys and page must reach of the transcript's own parts. */
  const reach = { find: () => {}, follow: () => {}, note: () => {} }

  const act: Record<SessionAction, (event: KeyboardEvent) => void> = {
    'toggle': player.toggle, 'back': () => player.shuttle(-1), 'pause': player.pause, 'on': () => player.shuttle(1),
    'second-back': () => player.nudge(-1000), 'second-on': () => player.nudge(1000), 'frame-back': () => player.frame(-1), 'frame-on': () => player.frame(1),
    'camera': () => player.nextCamera() || say('Only one camera was running here'),
    'in': event => marks.set('in', event.altKey), 'out': event => marks.set('out', event.altKey),
    'go-in': () => marks.goTo('in'), 'go-out': () => marks.goTo('out'),
    'clear': () => marks.marks.value ? marks.clear() : tagging.select(null),
    'tag': () => void tagging.enter(), 'retag': () => tagging.open(),
    'pencilled-before': () => tagging.stepPencilled(-1), 'pencilled-after': () => tagging.stepPencilled(1),
    'other-step': event => tagging.takeStep(digitOf(event)), 'other-operation': event => tagging.takeOperation(digitOf(event)),
    'chapter-before': () => tagging.step(-1), 'chapter-after': () => tagging.step(1),
    'split': tagging.splitHere, 'join': tagging.joinNext, 'ink': tagging.inkIt, 'start-here': () => tagging.edgeHere('start'), 'end-here': () => tagging.edgeHere('end'),
    'note': () => reach.note(), 'delete': tagging.deleteIt, 'undo': () => void edits.undo(), 'redo': () => void edits.redo(),
    'find': () => reach.find(), 'follow': () => reach.follow(), 'keys': () => keysOpen.value = true,
  }
  useSessionKeys(act, () => clips.value.length > 0)

  // A search result or a link leads to a moment: ?clip=…&at=seconds of that clip.
  const route = useRoute()
  let gone = ''
  function goToLink(): void {
    const { clip, at } = route.query
    const link = `${clip}@${at}`
    if (typeof clip !== 'string' || link === gone || !player.placed.value.some(one => one.id === clip)) return
    gone = link
    const ms = Math.round(Number(at ?? 0) * 1000)
    player.enter(clip, Number.isFinite(ms) ? ms : 0)
  }
  // After mounting: the server draws the page at its beginning, and the first drawing in the browser must be the same.
  onMounted(() => watch(() => [route.query.clip, route.query.at, player.placed.value.length], goToLink, { immediate: true }))

  return { ...live, session, clips, steps, parts, plan, edits, captions, said, player, marks, tagging, keysOpen, spoken, reach, ready: Promise.all([plan]) }
}

export type SessionPage = ReturnType<typeof useSessionPage>
