import { createInterface } from 'node:readline'
import { parseArgs } from 'node:util'
import { DomainError } from '#shared/utils/errors'
import { pencilChapters } from '#server/indexing/pencil/pencil'
import { answersIn, searchableSession } from '#server/indexing/search/sessionCandidates'
import { readPlanFiles } from './planFiles'
import { fail, print } from './terminal'

/**
 * Answers questions about a session, one a line on stdin, one JSON line out for each: `npm run --silent ask --
 * --plan plan.csv --parts parts.csv --captions a.vtt [--captions b.vtt …] --json`. Ranks as the site's search does, without
 * a database; writes nothing. Exit 2: wrong arguments.
 */
const USAGE = 'Usage: npm run --silent ask -- --plan plan.csv --parts parts.csv --captions a.vtt [--captions b.vtt …] --json'

function readArguments() {
  try {
    const { values } = parseArgs({ options: { plan: { type: 'string' }, parts: { type: 'string' }, captions: { type: 'string', multiple: true }, json: { type: 'boolean', default: false } } })
    const { plan, parts, captions } = values
    if (!plan || !parts || !captions?.length) return fail(2, `Name a plan, a list of parts and at least one caption file. ${USAGE}`)
    if (!values.json) return fail(2, `Only --json can be printed. ${USAGE}`)
    return { plan, parts, captions }
  }
  catch (error) {
    return fail(2, `${(error as Error).message.split(/[.\n]/)[0]}. ${USAGE}`)
  }
}

async function main(): Promise<void> {
  const { steps, parts, clips } = await readPlanFiles(readArguments(), USAGE)
  const session = searchableSession(steps, parts, clips, pencilChapters({ steps, parts, clips }))
  for await (const line of createInterface({ input: process.stdin, crlfDelay: Infinity })) {
    const question = line.trim()
    if (question) await print(JSON.stringify({ question, moments: answersIn(session, question) }))
  }
}

try {
  await main()
}
catch (error) {
  if (!(error instanceof DomainError)) throw error
  fail(1, error.message)
}
