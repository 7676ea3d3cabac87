import { join } from 'node:path'
import { type Fitted, pencil, pencilChapters } from '#server/indexing/pencil/pencil'
import { plainBm25, simpleViterbi } from './baselines'
import { correctionsNeeded } from './corrections'
import { curveThrough, fitBoth, foldsOf, judge, type Judged, tickedSteps, uncalibrated } from './crossValidate'
import { type LabelledSession, loadSessions } from './load'
import { longSession } from './longSession'
import { f1, type Matched, matchFacts, matchTold } from './matching'
import { answerFigures, crossValidatedAnswers, plainAnswers, tallyAnswers } from './questions'
import { figuresOf, type Tally, tallyChapters } from './score'

/**
 * Prints how well the program pencils: `npm run measure:indexing [-- FOLDER …]`. Every session is judged by a
 * model that was fitted on other builds; two plain methods are computed beside it. Takes some minutes.
 */
const roots = process.argv.slice(2)
const sessions = (roots.length ? roots : [join(import.meta.dirname, '../../fixtures/sessions')]).flatMap(root => loadSessions(root))
const say = (line: string) => process.stderr.write(`${line}\n`)
const three = (value: number) => value.toFixed(3).replace(/^0/, '')

interface Judgement { open: Tally[], ticked: Tally[] }
const methods: Record<string, Judgement> = { bm25: { open: [], ticked: [] }, viterbi: { open: [], ticked: [] }, ribband: { open: [], ticked: [] } }
const facts: Matched[] = []
const told: Matched[] = []
const corrections: number[] = []
const judged: { open: Judged[], ticked: Judged[] } = { open: [], ticked: [] }

function judgeSession(session: LabelledSession, fitted: Fitted): void {
  const { steps, parts, truth } = session
  const clips = [{ cues: session.cues, durationMs: truth.durationMs }]
  const known = new Set(tickedSteps(session))
  for (const mode of ['open', 'ticked'] as const) {
    const ticked = mode === 'ticked' ? known : null
    methods.bm25![mode].push(tallyChapters(truth, plainBm25(session, ticked)))
    methods.viterbi![mode].push(tallyChapters(truth, simpleViterbi(session, ticked)))
    methods.ribband![mode].push(tallyChapters(truth, pencilChapters({ steps, parts, clips, ticked: ticked && [...ticked] }, fitted)))
    judged[mode].push(...judge(session, fitted, mode === 'ticked'))
  }
  const { facts: heard, toldNotShown } = pencil({ steps, parts, clips }, fitted)
  facts.push(matchFacts(truth, heard))
  told.push(matchTold(truth, toldNotShown))
  corrections.push(correctionsNeeded(session, fitted))
  const mine = figuresOf([methods.ribband!.open.at(-1)!])
  const helped = figuresOf([methods.ribband!.ticked.at(-1)!])
  say(`  ${session.build} ${session.name}: step ${three(mine.stepTime)} (ticked ${three(helped.stepTime)}), operation ${three(mine.operationTime)}, ${corrections.at(-1)} corrections`)
}

for (const fold of foldsOf(sessions, 4)) {
  say(`fitting without ${fold.join(', ')}`)
  const fitted = uncalibrated(fitBoth(sessions.filter(session => !fold.includes(session.build))))
  for (const session of sessions.filter(session => fold.includes(session.build))) judgeSession(session, fitted)
}

const all = Object.fromEntries(Object.entries(methods).map(([name, { open, ticked }]) => [name, { open: figuresOf(open), ticked: figuresOf(ticked) }]))
const row = (label: string, value: (method: typeof all[string]) => number) => console.log(`${label.padEnd(58)}${['bm25', 'viterbi', 'ribband'].map(name => three(value(all[name]!)).padStart(10)).join('')}`)
console.log(`${sessions.length} sessions of ${new Set(sessions.map(session => session.build)).size} builds, each judged by a model fitted on other builds\n`)
console.log(`${''.padEnd(58)}${'BM25/cue'.padStart(10)}${'Viterbi'.padStart(10)}${'Ribband'.padStart(10)}`)
row('working time with the right step, nothing ticked', method => method.open.stepTime)
row('the same, the steps of the day ticked', method => method.ticked.stepTime)
row('time with the right operation', method => method.open.operationTime)
row('none, F1 by time', method => method.open.noneF1)
row('WindowDiff of edges (less is better)', method => method.open.windowDiff)
const alone = (label: string, value: string) => console.log(`${label.padEnd(58)}${''.padStart(20)}${value.padStart(10)}`)
alone('facts, F1', three(f1(facts)))
alone('told, not shown, F1', three(f1(told)))
alone('corrections until 95 % of working time is right', (corrections.reduce((sum, n) => sum + n, 0) / corrections.length).toFixed(1))

const plain = answerFigures(sessions.map(session => tallyAnswers(session.truth.questions, plainAnswers(session))))
const answered = answerFigures(crossValidatedAnswers(sessions).map(({ tally }) => tally))
const beside = (label: string, of: (figures: typeof plain) => number) => console.log(`${label.padEnd(58)}${three(of(plain)).padStart(10)}${''.padStart(10)}${three(of(answered)).padStart(10)}`)
beside('first answer right', figures => figures.first)
beside('one of the first three right', figures => figures.firstThree)

console.log('\nOf stretches said so likely, so much was right (by time; bins of equal time):')
for (const mode of ['open', 'ticked'] as const) console.log(`  ${mode === 'open' ? 'nothing ticked' : 'steps ticked  '}  ${curveThrough(judged[mode]).slice(1, -1).map(([x, y]) => `${three(x)} → ${three(y)}`).join('   ')}`)

function time(run: () => void, times: number): { cpu: number, wall: number } {
  run()
  const cpu = process.cpuUsage()
  const from = performance.now()
  for (let i = 0; i < times; i++) run()
  const { user, system } = process.cpuUsage(cpu)
  return { cpu: (user + system) / 1000 / times, wall: (performance.now() - from) / times }
}
const first = sessions[0]!
const short = time(() => pencilChapters({ steps: first.steps, parts: first.parts, clips: [{ cues: first.cues }] }), 10)
const longer = longSession(sessions, 6, 200)
const long = time(() => pencilChapters(longer), 1)
console.log(`\nRe-alignment: ${(first.truth.durationMs / 60000).toFixed(0)} minutes, ${first.steps.length} steps: ${short.wall.toFixed(0)} ms (${short.cpu.toFixed(0)} ms CPU; budget 200). 6 hours, 200 steps: ${(long.wall / 1000).toFixed(1)} s (${(long.cpu / 1000).toFixed(1)} s CPU; budget 5).`)
