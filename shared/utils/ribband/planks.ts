import type { StepView } from '../../types/plan'
import type { ChapterView } from '../../types/session'
import { OPERATION_WORDS } from '../operations'
import { formatClock } from '../time/clock'
import { clamp, lowerBound } from './search'
import { toX, viewEnd, type View } from './scale'

/** How a chapter is drawn: fastened plank, plank held by clamps, or bare floor. */
export type PlankKind = 'inked' | 'pencilled' | 'bare'

/** A chapter on the line. */
export interface Plank {
  chapter: ChapterView
  lane: number
  /** Place on the line. */
  startMs: number
  endMs: number
  kind: PlankKind
  /** Height of the plank, 1 for what is sure. */
  thickness: number
  /** Step number for the balloon. */
  number: number | null
  /** Operation word. */
  word: string
  /** Step title. */
  title: string
}

/** Least thickness of a pencilled plank: still high enough for its balloon. */
const THINNEST = 0.62

export function plankOf(chapter: ChapterView, step: StepView | undefined, place: { lane: number, clipLineMs: number }): Plank {
  const bare = chapter.stepId === null && chapter.operation === 'none'
  return {
    chapter,
    lane: place.lane,
    startMs: place.clipLineMs + chapter.startMs,
    endMs: place.clipLineMs + chapter.endMs,
    kind: bare ? 'bare' : chapter.inking,
    thickness: chapter.inking === 'inked' ? 1 : THINNEST + (1 - THINNEST) * clamp(chapter.confidence ?? 0.5, 0, 1) ** 2,
    number: step?.number ?? null,
    word: OPERATION_WORDS[chapter.operation].label,
    title: step?.title ?? '',
  }
}

/** Planks of one band in sight; `planks` in order, not overlapping. */
export function planksInSight(planks: readonly Plank[], view: View): Plank[] {
  const from = lowerBound(planks.length, index => planks[index]!.endMs, view.startMs)
  const to = lowerBound(planks.length, index => planks[index]!.startMs, viewEnd(view))
  return planks.slice(from, to)
}

/** The part of a plank that is in sight, in pixels; at least one pixel wide. */
export function plankSpan(plank: Plank, view: View): { left: number, right: number } {
  const left = Math.max(-20, toX(view, plank.startMs))
  return { left, right: Math.max(left + 1, Math.min(view.widthPx + 20, toX(view, plank.endMs))) }
}

export interface PlankLabel { balloon: boolean, word: string, title: string }
/** Width in pixels of a text set as the operation word or as the step title. */
export type Measure = (text: string, as: 'word' | 'title') => number

export const BALLOON_PX = 22
const PAD_PX = 7
const GAP_PX = 6

/** What can be written on a plank of this width: the balloon first, then the operation, then the title. */
export function fitLabel(plank: Plank, widthPx: number, measure: Measure): PlankLabel {
  const label: PlankLabel = { balloon: false, word: '', title: '' }
  let room = widthPx - 2 * PAD_PX
  if (plank.kind !== 'bare' && plank.number !== null && widthPx >= BALLOON_PX + 4) {
    label.balloon = true
    room -= BALLOON_PX + GAP_PX
  }
  const word = plank.chapter.operation === 'none' && plank.kind !== 'bare' ? '' : plank.word
  if (word !== '') {
    const width = measure(word, 'word')
    if (width > room) return label
    label.word = word
    room -= width + GAP_PX
  }
  if (plank.title !== '' && room > 24) label.title = ellipsis(plank.title, room, text => measure(text, 'title'), 6)
  return label
}

/** The text if it fits, its beginning with … if at least `least` letters of it do, else nothing. */
export function ellipsis(text: string, room: number, measure: (text: string) => number, least = 1): string {
  if (measure(text) <= room) return text
  const fitting = lowerBound(text.length, letters => measure(`${text.slice(0, letters + 1).trimEnd()}…`), room + 1e-6)
  return fitting >= Math.max(1, least) ? `${text.slice(0, fitting).trimEnd()}…` : ''
}

/** A chapter in words for screen readers: 'Step 7, Glue the transom: glue, inked, 4:05 to 6:10'. */
export function plankWords(plank: Plank, sessionStartMs: number): string {
  const step = plank.number === null ? 'No step' : `Step ${plank.number}, ${plank.title}`
  const sure = plank.chapter.confidence
  const state = plank.kind === 'inked'
    ? 'inked'
    : plank.kind === 'bare' ? plank.chapter.inking : `pencilled${sure === null ? '' : `, ${Math.round(sure * 100)} % sure`}`
  const length = plank.endMs - plank.startMs
  return `${step}: ${plank.word.toLowerCase()}, ${state}, ${formatClock(sessionStartMs)} to ${formatClock(sessionStartMs + length)}`
}
