import type { Operation } from '#shared/types/trade'
import { outside } from '#shared/utils/time/outside'
import { hearAdhesives } from '../facts/hearAdhesives'
import { hearFacts } from '../facts/hearFacts'
import { hearSpeaker } from '../facts/speaker'
import type { SpokenFact } from '../facts/types'
import { stepsSpokenOf } from './aboutSteps'
import { confidenceOf, type Curve } from './calibration'
import { evidenceOf, partBook, partsIn } from './evidence'
import { KINDS, W } from './lattice'
import { latticeOf } from './latticeOf'
import { decode, type Decoded, type Marginals, marginalsOf } from './marginals'
import { type FixedStretch, gather, type Material } from './material'
import { narrow, portionsOf, takePortion } from './portions'
import { listen, type Speech } from './speech'
import { indexSteps, type StepIndex } from './stepEvidence'
import { hearTold } from './told'
import { type FixedChapter, type Learned, type PencilledChapter, type PlanPart, type PlanStep, type SpokenClip, STEPLESS_KINDS, WORK_KINDS } from './types'
import type { Weights } from './model'
import { FITTED } from './weights'

export interface PencilInput {
  steps: PlanStep[]
  parts: PlanPart[]
  /** In the order in which they were filmed. */
  clips: SpokenClip[]
  /** Numbers of the steps worked on that day; null or empty when nobody said. */
  ticked?: readonly number[] | null
  fixed?: readonly FixedChapter[]
  /** Speech that was tied to steps of this plan before. */
  learned?: readonly Learned[]
  /** What the build is drawn in. */
  units?: 'inch' | 'mm' | null
}

/** The numbers of the model, for when nothing is known of the day and for when its steps are ticked. */
export interface FittedModel { weights: Weights, curve: Curve }
export interface Fitted { open: FittedModel, ticked: FittedModel }

export interface ToldNotShown { clip: number, atMs: number, step: number | null, words: string }
export interface PencilledFact extends SpokenFact { clip: number, step: number | null }
export interface Pencilled { chapters: PencilledChapter[], toldNotShown: ToldNotShown[], facts: PencilledFact[] }

/**
 * Works out what every stretch of a session shows: chapters that cover each clip from its start to its end
 * without gaps, in order of clip and time, around those that are fixed. Deterministic; no I/O; a session of
 * twelve minutes and a plan of thirty steps take well under 200 ms.
 */
export function pencilChapters(input: PencilInput, fitted: Fitted = FITTED): PencilledChapter[] {
  const speech = listen(input.clips)
  const ticked = new Set(input.ticked ?? [])
  for (const { step } of input.fixed ?? []) if (step !== null && ticked.size) ticked.add(step)
  const known = input.steps.filter(step => ticked.has(step.number))
  const steps = known.length ? known : input.steps
  if (!speech.cues.length) return layOut([], input)
  const fixed = fixedStretches(speech, steps, input.fixed ?? [])
  const { weights, curve } = known.length ? fitted.ticked : fitted.open
  const index = indexSteps(steps, input.parts)
  const book = partBook(input.parts)
  const proposed: Proposal[] = []
  let before: PlanStep | null = null
  for (const portion of portionsOf(speech, fixed)) {
    const mine = fixed.filter(({ from, to }) => from >= portion.from && to <= portion.to).map(stretch => ({ ...stretch, from: stretch.from - portion.from, to: stretch.to - portion.from }))
    const material = narrow(gather(takePortion(speech, portion), index, input.learned ?? [], mine, { from: portion.from, whole: speech.cues.length, ordered: known.length > 0 }), weights, MOST_STEPS)
    const lattice = latticeOf(material, weights, before ? material.index.steps.indexOf(before) + 1 : 0)
    const marginals = marginalsOf(lattice, material.speech.cues.length)
    const decoded = decode(lattice, marginals, material.seconds, DECODING)
    for (const chapter of decoded) proposed.push(describe(chapter, material, marginals, input, book, curve))
    before = decoded.reduce<PlanStep | null>((last, { step }) => step === null ? last : material.index.steps[step]!, before)
  }
  return layOut(proposed, input)
}

/** Steps weighed in one portion of a session; what nobody speaks of there is left out. */
const MOST_STEPS = 30

/** Chosen on the labelled sessions: what an operation and a well-placed turn are worth, in seconds of the right step. */
export const DECODING = { operation: 0.75, turn: 20, bar: 0.4 }

/** Fixed chapters in terms of cues; those over silence are cut in afterwards. */
function fixedStretches(speech: Speech, steps: PlanStep[], fixed: readonly FixedChapter[]): FixedStretch[] {
  const stretches: FixedStretch[] = []
  for (const chapter of [...fixed].sort((a, b) => a.clip - b.clip || a.startMs - b.startMs)) {
    const inside = (i: number) => {
      const cue = speech.cues[i]!
      const middle = (cue.startMs + cue.endMs) / 2
      return cue.clip === chapter.clip && middle >= chapter.startMs && middle < chapter.endMs
    }
    const from = speech.cues.findIndex((_, i) => inside(i))
    if (from < 0) continue
    let to = from
    while (to < speech.cues.length && inside(to)) to++
    if (stretches.some(other => from < other.to && other.from < to)) continue
    const at = chapter.step === null ? -1 : steps.findIndex(step => step.number === chapter.step)
    const stepless = STEPLESS_KINDS.indexOf(chapter.operation as typeof STEPLESS_KINDS[number])
    const work = WORK_KINDS.indexOf(chapter.operation as typeof WORK_KINDS[number])
    stretches.push(at >= 0 && work >= 0 ? { from, to, step: at, kind: work } : { from, to, step: null, kind: W + Math.max(0, stepless) })
  }
  return stretches
}

type Proposal = Omit<PencilledChapter, 'fixed'>

function describe(chapter: Decoded, material: Material, marginals: Marginals, input: PencilInput, book: ReturnType<typeof partBook>, curve: Curve): Proposal {
  const { speech, seconds, S } = material
  const { steps } = material.index
  const step = chapter.step === null ? null : steps[chapter.step]!
  const operation: Operation = chapter.kind < W ? WORK_KINDS[chapter.kind]! : STEPLESS_KINDS[chapter.kind - W]!
  const width = S + 1
  let time = 0
  const stepShare = new Float64Array(width)
  const operationShare = new Map<Operation, number>()
  for (let cue = chapter.from; cue < chapter.to; cue++) {
    time += seconds[cue]!
    for (let s = 0; s < width; s++) stepShare[s]! += marginals.steps[cue * width + s]! * seconds[cue]!
    for (let kind = 0; kind < KINDS; kind++) {
      const name = kind < W ? WORK_KINDS[kind]! : STEPLESS_KINDS[kind - W]!
      operationShare.set(name, (operationShare.get(name) ?? 0) + marginals.kinds[cue * KINDS + kind]! * seconds[cue]!)
    }
  }
  const share = (value: number) => confidenceOf(value / Math.max(time, 1e-9), curve)
  const others = [...stepShare].map((value, s) => ({ step: s < S ? steps[s]!.number : null, confidence: share(value) })).filter(other => other.step !== (step?.number ?? null)).sort((a, b) => b.confidence - a.confidence).slice(0, 3)
  const otherOperations = [...operationShare].map(([name, value]) => ({ operation: name, confidence: share(value) })).filter(other => other.operation !== operation).sort((a, b) => b.confidence - a.confidence).slice(0, 3)
  const cue = speech.cues[chapter.from]!
  return {
    clip: cue.clip,
    startMs: cue.first && (chapter.from > 0 || isClipStart(cue, input)) ? 0 : cue.startMs,
    endMs: speech.cues[chapter.to - 1]!.endMs,
    step: step?.number ?? null,
    operation,
    parts: partsIn(speech, chapter.from, chapter.to, step, book),
    confidence: confidenceOf(chapter.confidence, curve),
    evidence: evidenceOf(speech, chapter.from, chapter.to, step, operation, input.parts),
    otherSteps: others,
    otherOperations,
  }
}

/** The first cue of a portion is a clip's first only when the clip starts there. */
const isClipStart = (cue: Speech['cues'][number], input: PencilInput) => input.clips[cue.clip]!.cues.every(other => other.startMs >= cue.startMs)

const endOf = (clip: SpokenClip) => clip.durationMs ?? Math.max(0, ...clip.cues.map(cue => cue.endMs))

/** Puts proposals end to end on each clip, fixed chapters at their own times, and cuts what lies under them. */
function layOut(proposals: Proposal[], input: PencilInput): PencilledChapter[] {
  return input.clips.flatMap((clip, at) => {
    const mine = proposals.filter(proposal => proposal.clip === at)
    const fixed = (input.fixed ?? []).filter(chapter => chapter.clip === at).sort((a, b) => a.startMs - b.startMs)
    // A chapter made by hand over silence may end behind the last cue, when the clip's length is not known.
    const end = Math.max(endOf(clip), ...fixed.map(chapter => chapter.endMs))
    // Each proposal lasts until the next one starts.
    const stretched = mine.map((proposal, i) => ({ ...proposal, startMs: i ? proposal.startMs : 0, endMs: mine[i + 1]?.startMs ?? Math.max(end, proposal.endMs) }))
    if (!stretched.length && end > 0) stretched.push(empty(at, end))
    const free: PencilledChapter[] = []
    for (const proposal of stretched) {
      for (const piece of outside(proposal, fixed)) free.push({ ...proposal, ...piece, evidence: proposal.evidence.filter(({ atMs }) => atMs >= piece.startMs - 1 && atMs < piece.endMs), fixed: false })
    }
    const kept = fixed.map((chapter): PencilledChapter => {
      const own = mine.find(proposal => proposal.startMs < chapter.endMs && proposal.endMs > chapter.startMs && proposal.step === chapter.step)
      return { ...chapter, parts: own?.parts ?? [], confidence: 1, evidence: own?.evidence ?? [], otherSteps: [], otherOperations: [], fixed: true }
    })
    return joinSlivers([...free, ...kept].sort((a, b) => a.startMs - b.startMs))
  })
}

const SLIVER_MS = 1500

/** A scrap left beside fixed chapters, too short to be anything, goes to its pencilled neighbour. */
function joinSlivers(chapters: PencilledChapter[]): PencilledChapter[] {
  const joined: PencilledChapter[] = []
  const sliver = ({ startMs, endMs }: PencilledChapter) => endMs - startMs < SLIVER_MS
  for (const chapter of chapters) {
    const last = joined.at(-1)
    const both = last && !last.fixed && !chapter.fixed
    const same = both && last.step === chapter.step && last.operation === chapter.operation
    if (both && (same || sliver(chapter))) last.endMs = chapter.endMs
    else if (both && sliver(last)) joined.splice(-1, 1, { ...chapter, startMs: last.startMs })
    else joined.push({ ...chapter })
  }
  return joined
}

function empty(clip: number, endMs: number): Proposal {
  return { clip, startMs: 0, endMs, step: null, operation: 'none', parts: [], confidence: 0, evidence: [], otherSteps: [], otherOperations: [] }
}

/** Chapters, facts and what was told but not shown, each with its step. */
export function pencil(input: PencilInput, fitted: Fitted = FITTED): Pencilled {
  const chapters = pencilChapters(input, fitted)
  const at = (clip: number, ms: number) => chapters.find(chapter => chapter.clip === clip && ms >= chapter.startMs && ms < chapter.endMs)
  const speaker = hearSpeaker(input.clips.flatMap(clip => clip.cues.map(cue => cue.text)).join(' '), input.units ?? null)
  const facts = input.clips.flatMap((clip, clipAt) => [...hearFacts(clip, { speaker }), ...hearAdhesives(clip)]
    // Quantities in chat measure nothing.
    .flatMap((fact): PencilledFact[] => {
      const chapter = at(clipAt, fact.atMs)
      return chapter?.operation === 'none' && chapter.confidence >= 0.5 ? [] : [{ clip: clipAt, ...fact, step: chapter?.step ?? null }]
    })
    .sort((a, b) => a.atMs - b.atMs))
  // What is told may be of any step, ticked or not.
  const index = indexSteps(input.steps, input.parts)
  const toldNotShown = hearTold(input.clips).map(place => ({ ...place, step: stepTold(place, chapters, index) }))
  return { chapters, toldNotShown, facts }
}

/** The step that the words of a told place speak of, else the step they are spoken over. */
function stepTold(place: { clip: number, atMs: number, words: string }, chapters: PencilledChapter[], index: StepIndex): number | null {
  const over = chapters.find(chapter => chapter.clip === place.clip && place.atMs >= chapter.startMs && place.atMs < chapter.endMs)
  const guess = likeliestStep(place.words, index)
  if (guess && (guess.lead > 1.5 || !over || over.step === null)) return guess.step
  return over?.step ?? guess?.step ?? null
}

/** The step of the plan that a sentence is most about, and how far ahead of the next it is; null when it speaks of none. */
export function likeliestStep(words: string, index: StepIndex): { step: number, lead: number } | null {
  const spoken = stepsSpokenOf(words, index)
  const scores = index.steps.map((step, s) => ({ step: step.number, score: spoken[s]! })).sort((a, b) => b.score - a.score)
  const [first, second] = scores
  if (!first || first.score <= 0.5) return null
  return { step: first.step, lead: first.score - (second?.score ?? 0) }
}
