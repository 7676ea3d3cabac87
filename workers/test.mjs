// `npm test`: lint, types, unit, server and browser tests from a fresh clone. Last line: `N passed, M failed`.
import { spawn } from 'node:child_process'
import { existsSync, mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { buildSite, checkNode, installDebianPackages, installPackages, root, say } from './prepare.mjs'

const only = process.argv.includes('--only') ? process.argv[process.argv.indexOf('--only') + 1] : null
const reports = mkdtempSync(join(tmpdir(), 'ribband-reports-'))
const bin = name => join(root, 'node_modules/.bin', name)
const total = { passed: 0, failed: 0, skipped: 0 }
/** What each part took: seconds on the clock and, where it was a command, seconds of processor. */
const spent = []

/** Bash adds up what a command and all its children used, which Node cannot; the sum comes back on descriptor 3. */
const COUNTED = '"$0" "$@"; code=$?; times >&3; exit $code'

/** Seconds from the second line of bash's `times`, as `1m2.345s 0m1.234s`. */
function processorSeconds(times) {
  const spans = times.split('\n')[1]?.matchAll(/(\d+)m([\d.]+)s/g) ?? []
  return [...spans].reduce((sum, [, minutes, seconds]) => sum + 60 * Number(minutes) + Number(seconds), 0)
}

/** Runs work that is no command of its own and notes how long it took. */
function timed(title, work) {
  const began = Date.now()
  work()
  spent.push({ title, wall: (Date.now() - began) / 1000 })
}

/**
 * Runs one command; true when it ended well. Its output is ours as it comes, or in one piece at its end when other
 * commands run beside it (`whole`).
 */
function run(title, command, args, { env = {}, whole = false } = {}) {
  if (!whole) say(`── ${title}`)
  const began = Date.now()
  return new Promise((resolve) => {
    const out = whole ? 'pipe' : 'inherit'
    const child = spawn('bash', ['-c', COUNTED, command, ...args], { cwd: root, stdio: ['ignore', out, out, 'pipe'], env: { ...process.env, ...env } })
    const said = []
    let times = ''
    for (const stream of [child.stdout, child.stderr]) stream?.on('data', chunk => said.push(chunk))
    child.stdio[3].on('data', chunk => times += chunk)
    child.once('error', error => (console.error(error.message), resolve(false)))
    child.once('close', (code) => {
      if (whole) say(`── ${title}`)
      if (said.length) process.stdout.write(Buffer.concat(said))
      const wall = (Date.now() - began) / 1000
      spent.push({ title, wall, processor: processorSeconds(times) })
      say(`── ${title}: ${code === 0 ? 'passed' : 'FAILED'} in ${wall.toFixed(0)} s`)
      resolve(code === 0)
    })
  })
}

function count(ok) {
  total[ok ? 'passed' : 'failed']++
}

/** Vitest's and Playwright's own counts; a run that broke before it could report is one failure. */
function countReport(file, ok, read) {
  if (!existsSync(file)) return count(false)
  const { passed, failed, skipped } = read(JSON.parse(readFileSync(file, 'utf8')))
  total.passed += passed
  total.skipped += skipped
  total.failed += failed || (ok ? 0 : 1)
}

async function vitest(title, args) {
  const file = join(reports, `${title.replaceAll(' ', '-')}.json`)
  const ok = await run(title, bin('vitest'), ['run', ...args, '--reporter=default', '--reporter=json', `--outputFile.json=${file}`])
  countReport(file, ok, report => ({ passed: report.numPassedTests, failed: report.numFailedTests, skipped: report.numPendingTests + report.numTodoTests }))
}

async function playwright(title, config) {
  const file = join(reports, `${title.replaceAll(' ', '-')}.json`)
  const ok = await run(title, bin('playwright'), ['test', `--config=${config}`, '--reporter=list,json'], { env: { PLAYWRIGHT_JSON_OUTPUT_NAME: file } })
  countReport(file, ok, ({ stats }) => ({ passed: stats.expected + stats.flaky, failed: stats.unexpected, skipped: stats.skipped }))
}

const prepare = async () => count(await run('types of Nuxt', bin('nuxt'), ['prepare']))
const parts = {
  lint: async whole => count(await run('lint', process.execPath, ['--import', './workers/groupBy.mjs', 'node_modules/eslint/bin/eslint.js', '.', '--max-warnings=0'], { whole })),
  types: async whole => count(await run('type check', bin('vue-tsc'), ['-b', '--noEmit'], { whole })),
  unit: () => vitest('unit tests', ['--project=unit', '--project=components']),
  server: () => vitest('server tests', ['--project=server']),
  browser: () => playwright('browser tests', 'playwright.config.ts'),
  faults: () => playwright('fault tests', 'playwright.faults.config.ts'),
}
const needsSite = part => part === 'browser' || part === 'faults'
const build = () => timed('build of the site', buildSite)

/**
 * Everything. Lint and type check use one core and wait for nobody, unit and server tests wait for ffmpeg, storage and
 * database: side by side the two halves fill two cores. The site is built before, since a build empties `.nuxt`, which
 * all of them read.
 */
async function all() {
  build()
  await prepare()
  await Promise.all([
    (async () => (await parts.lint(true), await parts.types(true)))(),
    (async () => (await parts.unit(), await parts.server()))(),
  ])
  await parts.browser()
  await parts.faults()
}

async function one(part) {
  if (needsSite(part)) build()
  else await prepare()
  await parts[part]()
}

if (only && !parts[only]) {
  console.error(`There is no part called ${only}: choose ${Object.keys(parts).join(', ')}.`)
  process.exit(2)
}
checkNode()
timed('packages', () => {
  installPackages()
  installDebianPackages(['postgresql', 'ffmpeg', 'chromium'])
})
const began = Date.now()
await (only ? one(only) : all())
rmSync(reports, { recursive: true, force: true })

console.log(`\n${'part'.padEnd(20)}${'seconds'.padStart(9)}${'of processor'.padStart(14)}`)
for (const { title, wall, processor } of spent) console.log(`${title.padEnd(20)}${wall.toFixed(0).padStart(9)}${(processor?.toFixed(0) ?? '').padStart(14)}`)
console.log(`${'all of it'.padEnd(20)}${(spent[0].wall + (Date.now() - began) / 1000).toFixed(0).padStart(9)}\n`)
console.log(`${total.passed} passed, ${total.failed} failed${total.skipped ? `, ${total.skipped} skipped` : ''}`)
process.exit(total.failed || !total.passed ? 1 : 0)
