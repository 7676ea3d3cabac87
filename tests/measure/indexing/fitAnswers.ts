import { writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { fitAnswers, linesOf } from './answering'
import { loadSessions } from './load'
import { answerFigures, crossValidatedAnswers, plainAnswers, ribbandAnswers, tallyAnswers } from './questions'

/**
 * Fits the weights of search's ranking on labelled questions and writes them: `npm run fit:answers -- FOLDER …
 * [--test BUILD …] [--dry]`. Builds after `--test` are only measured with what the others taught.
 */
const given = process.argv.slice(2).filter(word => word !== '--dry')
const split = given.indexOf('--test')
const held = new Set(split < 0 ? [] : given.slice(split + 1))
const roots = split < 0 ? given : given.slice(0, split)
const sessions = (roots.length ? roots : [join(import.meta.dirname, '../../fixtures/sessions')]).flatMap(root => loadSessions(root))
const known = sessions.filter(session => !held.has(session.build))
const test = sessions.filter(session => held.has(session.build))
const asked = known.flatMap(linesOf)
const weights = fitAnswers(asked)
const say = (label: string, { asked, first, firstThree, mrr }: ReturnType<typeof answerFigures>) => console.log(`${label.padEnd(44)} first ${first.toFixed(3)}  of three ${firstThree.toFixed(3)}  MRR ${mrr.toFixed(3)}  (${asked} questions)`)
say('BM25 of single cues', answerFigures(known.map(session => tallyAnswers(session.truth.questions, plainAnswers(session)))))
say('Ribband, fitted on other builds', answerFigures(crossValidatedAnswers(known).map(({ tally }) => tally)))
if (test.length) {
  say('held out: BM25 of single cues', answerFigures(test.map(session => tallyAnswers(session.truth.questions, plainAnswers(session)))))
  say('held out: Ribband', answerFigures(test.map(session => tallyAnswers(session.truth.questions, ribbandAnswers(session, weights)))))
}
if (!process.argv.includes('--dry')) {
  const lines = Object.entries(weights).map(([name, value]) => `  ${name}: ${value},`).join('\n')
  writeFileSync(join(import.meta.dirname, '../../../server/indexing/search/answerWeights.ts'), `import type { AnswerWeights } from './rank'\n\n/** Written by \`npm run fit:answers\` (${asked.length} questions of ${new Set(known.map(session => session.build)).size} builds); not by hand. */\nexport const ANSWER_WEIGHTS: AnswerWeights = {\n${lines}\n}\n`)
}
