import { spawn } from 'node:child_process'
import { readdir } from 'node:fs/promises'
import { afterEach, describe, expect, it, vi } from 'vitest'
import { ending } from './ending'

const DINGHY = 'tests/fixtures/sessions/e-dinghy'
const FILES = ['--plan', `${DINGHY}/plan.csv`, '--parts', `${DINGHY}/parts.csv`, '--captions', `${DINGHY}/session-1.vtt`]
const DEMO = 'workers/demo/footage'

const argv = process.argv
afterEach(() => {
  process.argv = argv
})

function ask(questions: string, ...args: string[]): Promise<{ code: number | null, lines: string[], stderr: string }> {
  return new Promise((resolve) => {
    const child = spawn(process.execPath, ['--import', 'tsx', 'workers/commands/ask.ts', ...args])
    let stdout = ''
    let stderr = ''
    child.stdout.on('data', (data: Buffer) => { stdout += data.toString() })
    child.stderr.on('data', (data: Buffer) => { stderr += data.toString() })
    child.on('close', code => resolve({ code, lines: stdout.split('\n').filter(Boolean), stderr }))
    child.stdin.end(questions)
  })
}

const refused = (...args: string[]) => ending(() => {
  vi.resetModules()
  process.argv = [process.execPath, 'ask.ts', ...args]
  return import('../../../../workers/commands/ask')
})

interface Answer { question: string, moments: { clip: number, startMs: number, endMs: number, step: number | null, operation: string, score: number, words: string }[] }

describe('ask', () => {
  it('prints one line of moments for each question, best first and apart, and nothing for empty lines', async () => {
    const { code, lines, stderr } = await ask('how are the staples pulled?\n\n  \nwhy is the hull faired', ...FILES, '--json')
    expect({ code, stderr }).toEqual({ code: 0, stderr: '' })
    const answers = lines.map(line => JSON.parse(line) as Answer)
    expect(answers.map(answer => answer.question)).toEqual(['how are the staples pulled?', 'why is the hull faired'])
    for (const { moments } of answers) {
      expect(moments.length).toBeGreaterThan(0)
      expect(moments.length).toBeLessThanOrEqual(10)
      expect(moments.map(moment => moment.score)).toEqual(moments.map(moment => moment.score).sort((a, b) => b - a))
      moments.forEach(({ startMs, ...moment }, i) => {
        expect(Object.keys(moment)).toEqual(['clip', 'endMs', 'step', 'operation', 'score', 'words'])
        expect(moment.endMs).toBeGreaterThan(startMs)
        expect(moments.slice(0, i).every(other => Math.abs(other.startMs - startMs) >= 20_000)).toBe(true)
      })
    }
  }, 60_000)

  it('knows where the demo says at what angle a bevel was set', async () => {
    const captions = (await readdir(DEMO)).filter(name => /\.(?:vtt|srt)$/.test(name)).sort()
    const { lines } = await ask('what angle was the bevel', '--plan', 'workers/demo/plan.csv', '--parts', 'workers/demo/parts.csv', ...captions.flatMap(name => ['--captions', `${DEMO}/${name}`]), '--json')
    const { moments: [first] } = JSON.parse(lines[0]!) as Answer
    expect(first!.words).toContain('12 3/4 degrees')
  }, 60_000)

  it.each([
    ['no files', []],
    ['no format', FILES],
    ['an unknown option', [...FILES, '--json', '--fast']],
    ['a file that is not there', [...FILES, '--captions', 'nowhere.vtt', '--json']],
  ])('answers wrong arguments with one line and exit 2: %s', async (_, args) => {
    const end = await refused(...args)
    expect(end?.code).toBe(2)
    expect(end!.said.trim().split('\n')).toHaveLength(1)
  }, 30_000)
})
