import type { StepView } from '#shared/types/plan'
import type { ChapterView, ClipView, CueView } from '#shared/types/session'

/** Two clips of a minute with an hour between them, three chapters and a few words. */
export const clips: ClipView[] = [0, 3_660_000].map((offsetMs, index) => ({
  id: `clip${index}`, name: `VID_2026090${index}.mp4`, sizeBytes: 1, state: 'ready', failure: null, durationMs: 60_000, offsetMs, offsetByHand: false, camera: 'Phone', recordedAt: null, recordedAtSource: null,
  video: { width: 1920, height: 1080, frameRate: { numerator: 25, denominator: 1 } }, hasSound: true, src: null, poster: null, sheets: null, peaks: null, sceneChangesMs: [], silences: [], warnings: [], tasks: [],
}))

export const steps: StepView[] = [[3, 'Cut the transom'], [7, 'Glue the transom']].map(([number, title]) => ({
  id: `step${number}`, number: number as number, position: number as number, stage: 'Hull', title: title as string, description: '', materials: [], partIds: [], status: 'to-do', plannedMinutes: null, spentMinutes: null, archived: false,
}))

const chapter = (id: string, over: Partial<ChapterView>): ChapterView => ({
  id, clipId: 'clip0', startMs: 0, endMs: 1, stepId: null, operation: 'none', partIds: [], inking: 'inked', confidence: null, evidence: [], alternatives: { steps: [], operations: [] }, proposed: false, note: '', version: 1, inkedBy: null, updatedBy: null, ...over,
})
export const chapters: ChapterView[] = [
  chapter('a', { startMs: 5000, endMs: 20_000, stepId: 'step3', operation: 'cut' }),
  chapter('b', { startMs: 20_000, endMs: 50_000, stepId: 'step7', operation: 'glue', inking: 'pencilled', confidence: 0.8 }),
  chapter('c', { clipId: 'clip1', startMs: 0, endMs: 30_000, stepId: 'step7', operation: 'clean-up' }),
]

export const cues: CueView[] = [{ id: 'cue', trackId: 't', clipId: 'clip0', startMs: 21_000, endMs: 24_000, text: 'mix one small batch', edited: false, original: null, version: 1 }]
