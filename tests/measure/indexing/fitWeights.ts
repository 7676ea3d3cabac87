import { join } from 'node:path'
import { curveThrough, fitBoth, foldsOf, judge, uncalibrated } from './crossValidate'
import { loadSessions } from './load'
import { writeWeights } from './writeWeights'

/**
 * Fits the numbers of the model: `npm run fit:indexing [-- FOLDER …]`. Weights on all labelled sessions; the
 * curves of confidence on sessions that the weights they are judged with have not seen. Takes some minutes.
 */
const HERE = join(import.meta.dirname, '../../fixtures/sessions')
const roots = process.argv.slice(2)
const sessions = (roots.length ? roots : [HERE]).flatMap(root => loadSessions(root))
const say = (line: string) => process.stderr.write(`${line}\n`)
say(`${sessions.length} sessions of ${new Set(sessions.map(session => session.build)).size} builds`)

const judged = { open: [] as ReturnType<typeof judge>, ticked: [] as ReturnType<typeof judge> }
for (const fold of foldsOf(sessions, 4)) {
  say(`without ${fold.join(', ')}`)
  const fitted = uncalibrated(fitBoth(sessions.filter(session => !fold.includes(session.build))))
  for (const session of sessions.filter(session => fold.includes(session.build))) {
    judged.open.push(...judge(session, fitted, false))
    judged.ticked.push(...judge(session, fitted, true))
  }
}
say('with all')
const weights = fitBoth(sessions, line => /round (?:1|\d*[05]):/.test(line) && say(line))
writeWeights(join(import.meta.dirname, '../../../server/indexing/pencil/weights.ts'), {
  open: { weights: weights.open, curve: curveThrough(judged.open) },
  ticked: { weights: weights.ticked, curve: curveThrough(judged.ticked) },
}, `${sessions.length} sessions`)
