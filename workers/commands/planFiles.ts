import { readFile } from 'node:fs/promises'
import { DomainError } from '#shared/utils/errors'
import { orderCues } from '#server/indexing/captions/order'
import { readCaptions } from '#server/indexing/captions/readCaptions'
import type { PlanPart, PlanStep, SpokenClip } from '#server/indexing/pencil/types'
import { readParts } from '#server/indexing/plan/readParts'
import { readPlan } from '#server/indexing/plan/readPlan'
import { fail } from './terminal'

async function bytesOf(file: string, usage: string): Promise<Uint8Array> {
  try {
    return await readFile(file)
  }
  catch (error) {
    const reasons: Record<string, string> = { ENOENT: 'there is no such file', EISDIR: 'it is a folder', EACCES: 'it may not be read' }
    return fail(2, `${file}: ${reasons[(error as NodeJS.ErrnoException).code ?? ''] ?? (error as Error).message}. ${usage}`)
  }
}

function read<Of>(file: string, reading: () => Of): Of {
  try {
    return reading()
  }
  catch (error) {
    if (error instanceof DomainError) return fail(1, `${file}: ${error.message}`)
    throw error
  }
}

/** A plan, its parts and the captions of one or more clips, from files. */
export async function readPlanFiles(given: { plan: string, parts: string, captions: string[] }, usage: string): Promise<{ steps: PlanStep[], parts: PlanPart[], clips: SpokenClip[] }> {
  const planBytes = await bytesOf(given.plan, usage)
  const partBytes = await bytesOf(given.parts, usage)
  const plan = read(given.plan, () => readPlan(planBytes))
  const parts = read(given.parts, () => readParts(partBytes))
  const wrong = [...plan.problems.map(problem => `${given.plan}, row ${problem.row}: ${problem.message}`), ...parts.problems.map(problem => `${given.parts}, row ${problem.row}: ${problem.message}`)]
  if (wrong.length) fail(1, wrong.slice(0, 3).join(' '))
  const clips: SpokenClip[] = []
  for (const file of given.captions) {
    const bytes = await bytesOf(file, usage)
    clips.push({ cues: orderCues(read(file, () => readCaptions(bytes, { name: file })).cues).map(({ startMs, endMs, text }) => ({ startMs, endMs: Math.max(endMs, startMs), text })) })
  }
  return {
    steps: plan.steps.map(row => ({ number: row.number, stage: row.stage ?? '', title: row.title, description: row.description ?? '', parts: row.parts ?? [], materials: row.materials ?? [] })),
    parts: parts.parts.map(row => ({ name: row.name, aliases: row.aliases ?? [], material: row.material ?? '', thicknessMm: row.thicknessMm ?? null })),
    clips,
  }
}

/** "6,7,9-12" → 6, 7, 9, 10, 11, 12. */
export function stepNumbers(list: string, usage: string): number[] {
  const numbers = new Set<number>()
  for (const piece of list.split(',').map(piece => piece.trim()).filter(Boolean)) {
    const range = /^(\d{1,4})(?:-(\d{1,4}))?$/.exec(piece)
    if (!range || (range[2] !== undefined && Number(range[2]) < Number(range[1]))) fail(2, `--steps: “${piece}” is not a step number or a range such as 9-12. ${usage}`)
    for (let number = Number(range[1]); number <= Number(range[2] ?? range[1]); number++) numbers.add(number)
  }
  return [...numbers]
}
