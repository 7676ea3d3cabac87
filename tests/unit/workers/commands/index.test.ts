import { execFile } from 'node:child_process'
import { mkdtemp, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, afterEach, beforeAll, describe, expect, it, vi } from 'vitest'
import { ending } from './ending'

const DINGHY = 'tests/fixtures/sessions/e-dinghy'
const FILES = ['--plan', `${DINGHY}/plan.csv`, '--parts', `${DINGHY}/parts.csv`, '--captions', `${DINGHY}/session-1.vtt`]

let folder: string

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'index-command-'))
})
const argv = process.argv
afterEach(() => {
  process.argv = argv
})
afterAll(() => rm(folder, { recursive: true }))

const file = async (name: string, content: string): Promise<string> => {
  const path = join(folder, name)
  await writeFile(path, content)
  return path
}

function run(...args: string[]): Promise<{ code: number, stdout: string, stderr: string }> {
  return new Promise(resolve => execFile(process.execPath, ['--import', 'tsx', 'workers/commands/index.ts', ...args], { maxBuffer: 64 * 1024 * 1024 }, (error, stdout, stderr) => {
    resolve({ code: error ? Number(error.code) : 0, stdout, stderr })
  }))
}

/** How the command ends with these arguments, in this process: starting Node and tsx anew takes seconds. */
const refused = (...args: string[]) => ending(() => {
  vi.resetModules()
  process.argv = [process.execPath, 'index.ts', ...args]
  return import('../../../../workers/commands/index')
})

const oneLine = expect.stringMatching(/^[^\n]+\n$/)
const keys = (list: object[]) => [...new Set(list.map(one => Object.keys(one).join(' ')))]

describe('the index command', { timeout: 60_000 }, () => {
  it('prints one line of JSON in exactly this form, for several clips, the ticked steps alone and around what is inked', async () => {
    const inked = await file('inked.json', JSON.stringify([{ clip: 1, startMs: 60_123, endMs: 120_456, step: 7, operation: 'drill' }]))
    const { code, stdout, stderr } = await run(...FILES, '--captions', `${DINGHY}/session-2.vtt`, '--steps', '6,7,9-12', '--inked', inked, '--json')
    expect([code, stderr]).toEqual([0, ''])
    expect(stdout).toMatch(/^\{[^\n]+\}\n$/)
    const told = JSON.parse(stdout)
    expect(Object.keys(told)).toEqual(['chapters', 'toldNotShown', 'facts'])
    expect(keys(told.chapters)).toEqual(['clip startMs endMs step operation parts confidence evidence'])
    expect(keys(told.chapters.flatMap((chapter: { evidence: object[] }) => chapter.evidence))).toEqual(['atMs words'])
    expect(keys(told.toldNotShown)).toEqual(['clip atMs step words'])
    expect(keys(told.facts)).toEqual(['clip atMs kind text value unit step'])
    expect(new Set(told.chapters.map((chapter: { clip: number }) => chapter.clip))).toEqual(new Set([0, 1]))
    for (const chapter of told.chapters) if (chapter.step !== null) expect([6, 7, 9, 10, 11, 12]).toContain(chapter.step)
    expect(told.chapters).toContainEqual(expect.objectContaining({ clip: 1, startMs: 60_123, endMs: 120_456, step: 7, operation: 'drill', confidence: 1 }))
  })

  it.each([
    ['nothing', [], /^Name a plan, a list of parts and at least one caption file\. Usage: npm run --silent index -- --plan/],
    ['no --json', FILES, /^Only --json can be printed\. Usage/],
    ['an argument it does not know', [...FILES, '--json', '--nonsense'], /Unknown option '--nonsense'\. Usage|Unknown option '--nonsense'.*Usage/],
    ['a step that the plan has not', [...FILES, '--json', '--steps', '6,999'], /^--steps: step 999 is not in the plan\. Usage/],
    ['a file that is not there', ['--plan', 'absent.csv', ...FILES.slice(2), '--json'], /^absent\.csv: there is no such file\. Usage/],
  ] as const)('says in one line how it is used, with exit 2, for %s', async (_, args, line) => {
    const ended = await refused(...args)
    expect(ended).toEqual({ code: 2, said: oneLine })
    expect(ended!.said).toMatch(line)
  })

  it.each([
    ['not JSON', 'nonsense', /inked\.json: it is not JSON\./],
    ['a chapter that ends before it starts', '[{"clip":0,"startMs":5,"endMs":5,"step":1,"operation":"glue"}]', /a chapter must end after it starts/],
    ['a clip that is not there', '[{"clip":1,"startMs":0,"endMs":5,"step":1,"operation":"glue"}]', /names a clip that has no caption file/],
  ])('refuses --inked with %s, in one line with exit 2', async (_, content, line) => {
    const ended = await refused(...FILES, '--json', '--inked', await file('inked.json', content))
    expect(ended).toEqual({ code: 2, said: oneLine })
    expect(ended!.said).toMatch(line)
  })

  it('says in one line, with exit 1, what is wrong in a file', async () => {
    const prose = await file('prose.srt', 'no captions\nhere\n')
    expect(await run('--plan', `${DINGHY}/plan.csv`, '--parts', `${DINGHY}/parts.csv`, '--captions', prose, '--json')).toEqual({ code: 1, stdout: '', stderr: expect.stringMatching(/^[^\n]*prose\.srt: [^\n]+\n$/) })
    const plan = await file('plan.csv', 'number,title\none,Cut\n1,Glue\n')
    expect(await refused('--plan', plan, ...FILES.slice(2), '--json')).toEqual({ code: 1, said: expect.stringMatching(/^[^\n]*plan\.csv[^\n]+\n$/) })
  })
})
