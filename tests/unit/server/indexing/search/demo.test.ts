import { readdirSync, readFileSync } from 'node:fs'
import { expect, it } from 'vitest'
import { orderCues } from '#server/indexing/captions/order'
import { readCaptions } from '#server/indexing/captions/readCaptions'
import type { PencilledChapter } from '#server/indexing/pencil/types'
import { readParts } from '#server/indexing/plan/readParts'
import { readPlan } from '#server/indexing/plan/readPlan'
import { answersIn, searchableSession } from '#server/indexing/search/sessionCandidates'

const FOOTAGE = 'workers/demo/footage'
type Tagged = Pick<PencilledChapter, 'startMs' | 'endMs' | 'step' | 'operation' | 'parts'> & { state: string }

it('finds the angle of the bevel in the demo as it is inked, not where bevels can wait', () => {
  const files = readdirSync(FOOTAGE).filter(name => /\.(?:vtt|srt)$/.test(name)).sort()
  const clips = files.map(name => ({ cues: orderCues(readCaptions(readFileSync(`${FOOTAGE}/${name}`), { name }).cues) }))
  const tags = JSON.parse(readFileSync(`${FOOTAGE}/chapters.json`, 'utf8')) as Record<string, { chapters: Tagged[] }>
  const chapters = files.flatMap((name, clip) => (tags[`${name.split('.')[0]}.mp4`]?.chapters ?? []).map((chapter): PencilledChapter => ({
    ...chapter, clip, step: chapter.step ?? null, parts: chapter.parts ?? [], confidence: 0.7, evidence: [], otherSteps: [], otherOperations: [], fixed: chapter.state === 'inked',
  })))
  const steps = readPlan(readFileSync('workers/demo/plan.csv')).steps.map(row => ({ number: row.number, stage: row.stage ?? '', title: row.title, description: row.description ?? '', parts: row.parts ?? [], materials: row.materials ?? [] }))
  const parts = readParts(readFileSync('workers/demo/parts.csv')).parts.map(row => ({ name: row.name, aliases: row.aliases ?? [], material: row.material ?? '', thicknessMm: row.thicknessMm ?? null }))
  const [first] = answersIn(searchableSession(steps, parts, clips, chapters), 'what angle was the bevel')
  expect(first!.words).toContain('12 3/4 degrees')
})
