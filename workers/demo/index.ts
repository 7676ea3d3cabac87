import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { z } from 'zod'
import { INKINGS, OPERATIONS } from '#shared/types/trade'
import { demoScript } from './script'
import type { ClipScript } from './types'

const here = (path: string) => fileURLToPath(new URL(path, import.meta.url))

const chapterSchema = z.object({
  startMs: z.number().int().nonnegative(),
  endMs: z.number().int().positive(),
  step: z.number().int().positive().nullable(),
  operation: z.enum(OPERATIONS),
  parts: z.array(z.string()),
  state: z.enum(INKINGS),
  note: z.string().optional(),
})

/** `footage/chapters.json`: what `npm run demo:footage` measured, by the clip's file name. */
export const measuredSchema = z.record(z.string(), z.object({
  durationMs: z.number().int().positive(),
  chapters: z.array(chapterSchema),
}))

export type DemoChapter = z.infer<typeof chapterSchema>

export interface DemoPerson { name: string, email: string, password: string }

export interface DemoClip {
  /** Absolute paths of the committed footage and its captions. */
  file: string
  captions: string
  /** The name the phone gave the file. */
  name: string
  camera: string
  /** ISO 8601 with the shop's offset from UTC. */
  recordedAt: string
  durationMs: number
  chapters: DemoChapter[]
}

export interface DemoSession {
  date: string
  place: string
  temperatureC: number
  humidityPct: number
  notes: string
  stepNumbers: number[]
  /** Its chapters are left to the program. */
  toReview?: boolean
  clips: DemoClip[]
}

export interface DemoBuild {
  name: string
  boat: string
  summary: string
  units: 'inch' | 'mm'
  builder: DemoPerson
  helper: DemoPerson
  follower: DemoPerson
  planFile: string
  partsFile: string
  sessions: DemoSession[]
}

const measured = measuredSchema.parse(JSON.parse(readFileSync(here('./footage/chapters.json'), 'utf8')))

function clipOf(clip: ClipScript): DemoClip {
  const times = measured[clip.file]
  if (!times) throw new Error(`footage/chapters.json has no times for ${clip.file}: run npm run demo:footage.`)
  return {
    file: here(`./footage/${clip.file}`),
    captions: here(`./footage/${clip.captions}`),
    name: clip.file,
    camera: clip.camera.name,
    recordedAt: clip.recordedAt,
    ...times,
  }
}

/** The demo build that a first start lays down: an invented boat, three people, three sessions. */
export const demoBuild: DemoBuild = {
  name: 'Burdock',
  boat: '12 ft plywood pram',
  summary: 'A 12 ft rowing and sculling pram in plywood over chine logs, built upside down in an old apple store. One builder, one helper, most Saturdays.',
  units: 'inch',
  builder: { name: 'Maud Tarrowby', email: 'maud@burdock.example', password: 'maud-planes-the-chine' },
  helper: { name: 'Ivo Sandrake', email: 'ivo@burdock.example', password: 'ivo-holds-the-other-end' },
  follower: { name: 'Greta Ollerby', email: 'greta@ollerby.example', password: 'greta-watches-and-learns' },
  planFile: here('./plan.csv'),
  partsFile: here('./parts.csv'),
  sessions: demoScript.map(session => ({ ...session, clips: session.clips.map(clipOf) })),
}
