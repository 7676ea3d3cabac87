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

checkNode()
installPackages()
installDebianPackages(['postgresql', 'ffmpeg', 'chromium'])

/** Runs one command with its output on ours; true when it ended well. */
function run(title, command, args, env = {}) {
  say(`── ${title}`)
  const began = Date.now()
  return new Promise((resolve) => {
    const child = spawn(command, args, { cwd: root, stdio: ['ignore', 'inherit', 'inherit'], env: { ...process.env, ...env } })
    child.once('error', error => (console.error(error.message), resolve(false)))
    child.once('exit', (code) => {
      say(`── ${title}: ${code === 0 ? 'passed' : 'FAILED'} in ${((Date.now() - began) / 1000).toFixed(0)} s`)
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

async function browser(title, project) {
  const file = join(reports, `${project}.json`)
  const ok = await run(title, bin('playwright'), ['test', `--project=${project}`, '--reporter=list,json'], { PLAYWRIGHT_JSON_OUTPUT_NAME: file })
  countReport(file, ok, ({ stats }) => ({ passed: stats.expected + stats.flaky, failed: stats.unexpected, skipped: stats.skipped }))
}

const phases = {
  lint: async () => {
    count(await run('types of Nuxt', bin('nuxt'), ['prepare']))
    count(await run('lint', process.execPath, ['--import', './workers/groupBy.mjs', 'node_modules/eslint/bin/eslint.js', '.', '--max-warnings=0']))
  },
  types: async () => count(await run('type check', bin('vue-tsc'), ['-b', '--noEmit'])),
  unit: () => vitest('unit tests', ['--project=unit', '--project=components']),
  server: () => vitest('server tests', ['--project=server']),
  browser: async () => {
    buildSite()
    await browser('browser tests', 'browser')
  },
  faults: async () => {
    buildSite()
    await browser('fault tests', 'faults')
  },
}

if (only && !phases[only]) {
  console.error(`There is no part called ${only}: choose ${Object.keys(phases).join(', ')}.`)
  process.exit(2)
}
for (const [name, phase] of Object.entries(phases)) {
  if (!only || only === name) await phase()
}
rmSync(reports, { recursive: true, force: true })
console.log(`${total.passed} passed, ${total.failed} failed${total.skipped ? `, ${total.skipped} skipped` : ''}`)
process.exit(total.failed || !total.passed ? 1 : 0)
