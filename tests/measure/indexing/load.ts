import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import type { Operation } from '#shared/types/trade'
import { orderCues } from '#server/indexing/captions/order'
import { readCaptions } from '#server/indexing/captions/readCaptions'
import type { PlanPart, PlanStep, SpokenCue } from '#server/indexing/pencil/types'
import { readParts } from '#server/indexing/plan/readParts'
import { readPlan } from '#server/indexing/plan/readPlan'

export interface TrueFact { atMs: number, kind: string, text: string, value: number | null, unit: string | null, step: number | null }
export interface Truth {
  durationMs: number
  chapters: { startMs: number, endMs: number, step: number | null, operation: Operation, parts: string[] }[]
  offCamera: { atMs: number, step: number | null }[]
  facts: TrueFact[]
  questions: { q: string, startMs: number, endMs: number }[]
}
export interface LabelledSession { build: string, name: string, folder: string, steps: PlanStep[], parts: PlanPart[], cues: SpokenCue[], truth: Truth }

/** Labelled builds under a folder: BUILD/{plan.csv,parts.csv,session-n.vtt,session-n.truth.json}. */
export function loadSessions(root: string): LabelledSession[] {
  return readdirSync(root, { withFileTypes: true }).filter(entry => entry.isDirectory()).sort((a, b) => a.name < b.name ? -1 : 1).flatMap(({ name: build }) => {
    const folder = join(root, build)
    const files = readdirSync(folder)
    if (!files.includes('plan.csv') || !files.includes('parts.csv')) return []
    const steps = readPlan(readFileSync(join(folder, 'plan.csv'))).steps.map(row => ({ number: row.number, stage: row.stage ?? '', title: row.title, description: row.description ?? '', parts: row.parts ?? [], materials: row.materials ?? [] }))
    const parts = readParts(readFileSync(join(folder, 'parts.csv'))).parts.map(row => ({ name: row.name, aliases: row.aliases ?? [], material: row.material ?? '', thicknessMm: row.thicknessMm ?? null }))
    return files.filter(file => file.endsWith('.truth.json')).sort().map((file) => {
      const name = file.replace('.truth.json', '')
      const cues = orderCues(readCaptions(readFileSync(join(folder, `${name}.vtt`))).cues)
      return { build, name, folder, steps, parts, cues, truth: JSON.parse(readFileSync(join(folder, file), 'utf8')) as Truth }
    })
  })
}
