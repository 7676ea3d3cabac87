import type { StepView } from '#shared/types/plan'
import type { ChapterView, ClipView, CueView } from '#shared/types/session'
import { OPERATIONS } from '#shared/types/trade'

/** A made-up session to draw: clips with sound, pictures, captions and chapters. */
export interface Scene { clips: ClipView[], chapters: ChapterView[], cues: CueView[], steps: StepView[] }
interface ClipPlan { minutes: number, atMinutes: number, camera: string, chapters: number, cues: number }

const MINUTE = 60_000
export const SCENES: Record<string, ClipPlan[]> = {
  none: [],
  one: [{ minutes: 11.7, atMinutes: 0, camera: 'Phone', chapters: 8, cues: 140 }],
  ten: Array.from({ length: 10 }, (_, i) => ({ minutes: 2 + (i * 7 % 5), atMinutes: i * 9 + (i > 5 ? 80 : 0), camera: 'Phone', chapters: 3, cues: 40 })),
  lanes: [
    { minutes: 14, atMinutes: 0, camera: 'Bench phone', chapters: 7, cues: 150 },
    { minutes: 6, atMinutes: 3, camera: 'Overhead', chapters: 3, cues: 0 },
    { minutes: 8, atMinutes: 14, camera: 'Bench phone', chapters: 4, cues: 90 },
    { minutes: 5, atMinutes: 16, camera: 'Overhead', chapters: 2, cues: 0 },
  ],
  long: Array.from({ length: 6 }, (_, i) => ({ minutes: 60, atMinutes: i * 60 + (i > 2 ? 45 : 0), camera: 'Phone', chapters: 67, cues: 834 })),
}

const TITLES = ['Cut the strongback timbers', 'Set up the moulds', 'Fair the moulds with a batten', 'Cut the transom', 'Fit the transom knees', 'Scarf the planks', 'Hang the garboards', 'Bevel the stem', 'Glue the transom', 'Fillet the seams', 'Tape the chines', 'Shape the gunwales', 'Fit the thwarts', 'Seal the inside', 'Sand and prime']
const WORDS = 'so this is the aft transom and the grain runs across now we clamp it dry before any glue goes on check both diagonals then mix one small batch and spread it thin on both faces keep the squeeze out clean with the scraper and leave the clamps on until tomorrow morning'.split(' ')

export const steps: StepView[] = TITLES.map((title, index) => ({
  id: `step${index}`, number: index + 1, position: index, stage: 'Hull', title, description: '', materials: [], partIds: [], status: 'to-do', plannedMinutes: null, spentMinutes: null, archived: false,
}))

/** The same numbers on every run: mulberry32. */
function randomFrom(seed: number) {
  let state = seed >>> 0
  return () => {
    state = (state + 0x6D2B79F5) >>> 0
    let t = state
    t = Math.imul(t ^ (t >>> 15), t | 1)
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61)
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296
  }
}

export async function makeScene(name: string): Promise<Scene> {
  const scene: Scene = { clips: [], chapters: [], cues: [], steps }
  for (const [index, plan] of (SCENES[name] ?? []).entries()) {
    const random = randomFrom(index * 97 + name.length)
    const length = Math.round(plan.minutes * MINUTE)
    const id = `clip${index}`
    const cues = makeCues(id, length, plan.cues, random)
    const chapters = makeChapters(id, length, plan.chapters, random)
    const silences = cues.slice(1).map((cue, i) => ({ startMs: cues[i]!.endMs, endMs: cue.startMs })).filter(gap => gap.endMs - gap.startMs > 2500)
    scene.cues.push(...cues)
    scene.chapters.push(...chapters)
    scene.clips.push({
      id, name: `VID_20260905_1${index}0502.mp4`, sizeBytes: 1e9, state: 'ready', failure: null, durationMs: length, offsetMs: Math.round(plan.atMinutes * MINUTE), offsetByHand: false,
      camera: plan.camera, recordedAt: null, recordedAtSource: null, video: { width: 1920, height: 1080, frameRate: { numerator: 30000, denominator: 1001 } }, hasSound: true,
      src: null, poster: null, sheets: await makeSheets(length, index, chapters), peaks: makePeaks(length, cues, chapters, random),
      sceneChangesMs: chapters.slice(1).map(chapter => chapter.startMs + Math.round(random() * 900)), silences, warnings: [], tasks: [],
    })
  }
  return scene
}

function makeCues(clipId: string, length: number, count: number, random: () => number): CueView[] {
  const cues: CueView[] = []
  let word = 0
  for (let index = 0; index < count; index++) {
    const slot = length / count
    const startMs = Math.round(index * slot + random() * slot * 0.3)
    const words = 4 + Math.floor(random() * 7)
    const text = Array.from({ length: words }, () => WORDS[word++ % WORDS.length]).join(' ')
    cues.push({ id: `${clipId}-cue${index}`, trackId: 'track', clipId, startMs, endMs: Math.round(startMs + Math.min(slot * 0.68, words * 330)), text, edited: false, original: null, version: 1 })
  }
  return cues
}

function makeChapters(clipId: string, length: number, count: number, random: () => number): ChapterView[] {
  const cuts = Array.from({ length: count }, (_, i) => (i + (i === 0 ? 0.02 : random() * 0.7)) / count * length).map(Math.round)
  return cuts.map((startMs, index): ChapterView => {
    const next = cuts[index + 1] ?? length - 1500
    const isNone = random() < 0.14
    const inked = random() < 0.5
    return {
      id: `${clipId}-chapter${index}`, clipId, startMs, endMs: random() < 0.2 ? Math.round(startMs + (next - startMs) * 0.8) : next,
      stepId: isNone ? null : `step${Math.floor(random() * steps.length)}`, operation: isNone ? 'none' : OPERATIONS[Math.floor(random() * 14)]!, partIds: [],
      inking: inked ? 'inked' : 'pencilled', confidence: inked ? null : 0.25 + random() * 0.75, evidence: [], alternatives: { steps: [], operations: [] }, proposed: false, note: '', version: 1, inkedBy: null, updatedBy: null,
    }
  })
}

/** Talk comes in bursts, a planer holds its level, a quiet shop hums. */
function makePeaks(length: number, cues: CueView[], chapters: ChapterView[], random: () => number) {
  const perSecond = 20
  const bytes = new Uint8Array(Math.ceil(length / 1000 * perSecond))
  const fill = (from: number, to: number, level: (i: number) => number) => {
    for (let i = Math.floor(from / 50); i < Math.min(bytes.length, to / 50); i++) bytes[i] = Math.max(bytes[i]!, Math.min(255, level(i)))
  }
  fill(0, length, () => 2 + random() * 4)
  for (const cue of cues) fill(cue.startMs, cue.endMs, i => (Math.sin(i * 1.3) + Math.sin(i * 0.47) > 0.1 ? 70 + random() * 70 : 4 + random() * 10))
  for (const [index, chapter] of chapters.entries()) {
    if (index % 4 !== 2) continue
    const middle = (chapter.startMs + chapter.endMs) / 2
    const swell = 0.8 + random() * 0.2
    fill(chapter.startMs + (middle - chapter.startMs) * 0.2, middle + (chapter.endMs - middle) * 0.6, i => swell * (150 + random() * 30 + 40 * Math.sin(i / 160)))
  }
  return { perSecond, count: bytes.length, url: URL.createObjectURL(new Blob([bytes])) }
}

async function makeSheets(length: number, clip: number, chapters: ChapterView[]): Promise<NonNullable<ClipView['sheets']>> {
  const [tileWidth, tileHeight, columns, rows, intervalMs] = [160, 90, 16, 15, 5000]
  const count = Math.ceil(length / intervalMs)
  const images: string[] = []
  for (let first = 0; first < count; first += columns * rows) {
    const canvas = new OffscreenCanvas(columns * tileWidth, rows * tileHeight)
    const ctx = canvas.getContext('2d')!
    for (let n = 0; n < columns * rows && first + n < count; n++) {
      const at = (first + n) * intervalMs
      drawShop(ctx, (n % columns) * tileWidth, Math.floor(n / columns) * tileHeight, clip * 3 + chapters.findIndex(chapter => chapter.endMs > at), at)
    }
    images.push(URL.createObjectURL(await canvas.convertToBlob({ type: 'image/jpeg', quality: 0.7 })))
  }
  return { intervalMs, tileWidth, tileHeight, columns, rows, count, timesMs: Array.from({ length: count }, (_, n) => n * intervalMs), images }
}

/** A bench, a plank on it, a hand tool: enough to tell one picture from the next. */
function drawShop(ctx: OffscreenCanvasRenderingContext2D, x: number, y: number, scene: number, at: number) {
  const tones = [['#b9ab93', '#8a6b45', '#d9c39a'], ['#a9b3b0', '#6d5a44', '#c9a97a'], ['#8f9aa0', '#7d6242', '#e0cfa9'], ['#c7bda7', '#5b4a38', '#b98f5a'], ['#9aa08c', '#776046', '#d3b98b']]
  const [wall, bench, plank] = tones[((scene % 5) + 5) % 5]! as [string, string, string]
  const sway = Math.sin(at / 9000) * 24
  ctx.save()
  ctx.beginPath()
  ctx.rect(x, y, 160, 90)
  ctx.clip()
  ctx.fillStyle = wall
  ctx.fillRect(x, y, 160, 90)
  ctx.fillStyle = 'rgba(255,250,235,.5)'
  ctx.fillRect(x + 104 + sway / 3, y + 8, 34, 26)
  ctx.fillStyle = bench
  ctx.fillRect(x, y + 58, 160, 32)
  ctx.fillStyle = plank
  ctx.beginPath()
  ctx.moveTo(x + 18 + sway, y + 58)
  ctx.quadraticCurveTo(x + 80 + sway, y + 40 + (scene % 3) * 4, x + 146 + sway, y + 54)
  ctx.lineTo(x + 146 + sway, y + 62)
  ctx.quadraticCurveTo(x + 80 + sway, y + 50 + (scene % 3) * 4, x + 18 + sway, y + 66)
  ctx.fill()
  ctx.fillStyle = '#3a4046'
  ctx.fillRect(x + 60 - sway, y + 44, 26, 9)
  ctx.fillStyle = 'rgba(60,40,30,.85)'
  ctx.beginPath()
  ctx.arc(x + 64 - sway, y + 40, 8, 0, 7)
  ctx.fill()
  ctx.restore()
}
