import { loadSessions } from './load'
import { fitAnswers, linesOf, named, type AskedLines } from './answering'
import { K } from '#server/indexing/search/features'
const TEST = new Set(['h-cruiser', 'c-kayak', 'd-faering'])
const sessions = [...loadSessions('/work/shared/checks/sessions'), ...loadSessions('/tmp/sessions')]
const asked = sessions.flatMap(linesOf)
const dev = asked.filter(a => !TEST.has(a.build)), test = asked.filter(a => TEST.has(a.build))
const SP = Number(process.env.SP ?? 20000)
function moments(a: AskedLines, w: number[], smooth = Number(process.env.SM ?? 0)) {
  const n = a.starts.length
  const s = a.starts.map((_, i) => { let x = 0; for (let k = 0; k < K; k++) x += w[k]! * a.features[i * K + k]!; return x })
  const top = Math.max(...s); const p = s.map(x => Math.exp(x - top))
  const mass = smooth ? a.starts.map((t, i) => { let m = 0; for (let j = 0; j < n; j++) { const d = Math.abs(a.starts[j]! - t); if (d < smooth) m += p[j]! * (1 - d / smooth) } return m }) : p
  const order = mass.map((_, i) => i).sort((i, j) => mass[j]! - mass[i]!)
  const taken: number[] = []
  for (const i of order) { if (taken.length >= 10) break; if (taken.every(j => Math.abs(a.starts[j]! - a.starts[i]!) >= SP)) taken.push(i) }
  return taken
}
function figures(list: AskedLines[], wOf: (a: AskedLines) => number[], show = false) {
  let h1 = 0, h3 = 0, mrr = 0
  for (const a of list) { const at = moments(a, wOf(a)).findIndex(i => a.right[i]); if (at === 0) h1++; if (at >= 0 && at < 3) h3++; if (at >= 0) mrr += 1 / (at + 1); if (show && at !== 0) console.log(at, a.build, a.q) }
  return [h1, h3, mrr].map(x => (x / list.length).toFixed(3)).join(' ')
}
for (const pull of [1, 3, 10, 30]) {
  const folds = new Map([...new Set(dev.map(a => a.build))].map(b => [b, fitAnswers(dev.filter(a => a.build !== b), pull)]))
  const all = fitAnswers(dev, pull)
  for (const sm of [0, 5000, 8000, 12000, 18000]) { process.env.SM = String(sm); console.log(pull, sm, 'cv', figures(dev, a => folds.get(a.build)!), 'train', figures(dev, () => all), process.env.TESTIT ? 'test ' + figures(test, () => all) : '') }
  if (pull === 3) console.log(named(all))
}
if (process.env.SHOW) { process.env.SM='8000'; const folds = new Map([...new Set(dev.map(a => a.build))].map(b => [b, fitAnswers(dev.filter(a => a.build !== b), 3)])); figures(dev, a => folds.get(a.build)!, true) }
