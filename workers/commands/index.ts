import { readFile } from 'node:fs/promises'
import { parseArgs } from 'node:util'
import { z } from 'zod'
import { OPERATIONS } from '#shared/types/trade'
import { DomainError } from '#shared/utils/errors'
import { pencil } from '#server/indexing/pencil/pencil'
import type { FixedChapter } from '#server/indexing/pencil/types'
import { readPlanFiles, stepNumbers } from './planFiles'
import { fail, print } from './terminal'

/**
 * Prints what the program makes of a session: `npm run --silent index -- --plan plan.csv --parts parts.csv
 * --captions a.vtt [--captions b.srt …] [--steps 6,7,9-12] [--inked inked.json] --json`. Exit 2: wrong arguments.
 */
const USAGE = 'Usage: npm run --silent index -- --plan plan.csv --parts parts.csv --captions a.vtt [--captions b.srt …] [--steps 6,7,9-12] [--inked inked.json] --json'

const inkedSchema = z.array(z.object({
  clip: z.number().int().min(0),
  startMs: z.number().int().min(0),
  endMs: z.number().int().min(0),
  step: z.number().int().nullable(),
  operation: z.enum(OPERATIONS),
}).refine(chapter => chapter.endMs > chapter.startMs, 'a chapter must end after it starts'))

function readArguments() {
  try {
    const { values } = parseArgs({ options: { plan: { type: 'string' }, parts: { type: 'string' }, captions: { type: 'string', multiple: true }, steps: { type: 'string' }, inked: { type: 'string' }, json: { type: 'boolean', default: false } } })
    const { plan, parts, captions } = values
    if (!plan || !parts || !captions?.length) return fail(2, `Name a plan, a list of parts and at least one caption file. ${USAGE}`)
    if (!values.json) return fail(2, `Only --json can be printed. ${USAGE}`)
    return { ...values, plan, parts, captions }
  }
  catch (error) {
    return fail(2, `${(error as Error).message.split(/[.\n]/)[0]}. ${USAGE}`)
  }
}

async function readInked(file: string | undefined, clips: number): Promise<FixedChapter[]> {
  if (!file) return []
  let text: string
  try {
    text = await readFile(file, 'utf8')
  }
  catch {
    return fail(2, `${file}: cannot be read. ${USAGE}`)
  }
  try {
    const chapters = inkedSchema.parse(JSON.parse(text))
    if (chapters.some(chapter => chapter.clip >= clips)) return fail(2, `${file}: a chapter names a clip that has no caption file; clips count from 0.`)
    return chapters
  }
  catch (error) {
    const reason = error instanceof z.ZodError ? error.issues.map(issue => `${issue.path.join('.')}: ${issue.message}`).slice(0, 3).join('; ') : 'it is not JSON'
    return fail(2, `${file}: ${reason}. It must hold [{"clip":0,"startMs":0,"endMs":1,"step":1,"operation":"glue"}].`)
  }
}

async function main(): Promise<void> {
  const given = readArguments()
  const { steps, parts, clips } = await readPlanFiles(given, USAGE)
  const ticked = given.steps === undefined ? null : stepNumbers(given.steps, USAGE)
  const unknown = ticked?.find(number => !steps.some(step => step.number === number))
  if (unknown !== undefined) fail(2, `--steps: step ${unknown} is not in the plan. ${USAGE}`)
  const fixed = await readInked(given.inked, clips.length)
  const { chapters, toldNotShown, facts } = pencil({ steps, parts, clips, ticked, fixed })
  await print(JSON.stringify({
    chapters: chapters.map(({ clip, startMs, endMs, step, operation, parts, confidence, evidence }) => ({ clip, startMs, endMs, step, operation, parts, confidence, evidence })),
    toldNotShown: toldNotShown.map(({ clip, atMs, step, words }) => ({ clip, atMs, step, words })),
    facts: facts.map(({ clip, atMs, kind, text, value, unit, step }) => ({ clip, atMs, kind, text, value, unit, step })),
  }))
}

try {
  await main()
}
catch (error) {
  if (!(error instanceof DomainError)) throw error
  fail(1, error.message)
}
