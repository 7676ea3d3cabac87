import { execFile } from 'node:child_process'
import { mkdtemp, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'

let folder: string

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'captions-command-'))
})
afterAll(() => rm(folder, { recursive: true }))

const file = async (name: string, content: string | Uint8Array): Promise<string> => {
  const path = join(folder, name)
  await writeFile(path, content)
  return path
}

function run(...args: string[]): Promise<{ code: number, stdout: string, stderr: string }> {
  return new Promise(resolve => execFile(process.execPath, ['--import', 'tsx', 'workers/commands/captions.ts', ...args], { maxBuffer: 64 * 1024 * 1024 }, (error, stdout, stderr) => {
    resolve({ code: error ? Number(error.code) : 0, stdout, stderr })
  }))
}

const oneLine = expect.stringMatching(/^[^\n]+\n$/)

// Each run starts Node and tsx anew.
describe('the captions command', { timeout: 60_000 }, () => {
  it('prints JSON in exactly this form, in the order of a player', async () => {
    const path = await file('a.vtt', 'WEBVTT\n\n00:02.000 --> 00:03.000\nlater\n\nfirst\n00:00.000 --> 00:01.000\n<b>one</b>\ntwo\n')
    expect(await run(path, '--json')).toEqual({
      code: 0,
      stdout: '{"cues":[{"id":"first","startMs":0,"endMs":1000,"text":"one\\ntwo"},{"id":"","startMs":2000,"endMs":3000,"text":"later"}],"warnings":["The caption at 0:00.0 comes after a later one in the file. It was put in order by its time."]}\n',
      stderr: '',
    })
  })

  it.each([
    ['empty.vtt', 'WEBVTT\n', /holds no caption/],
    ['wrong.vtt', 'WEBVT\n\n00:00.000 --> 00:01.000\nx', /starts with “WEBVTT”/],
    ['nothing.vtt', '', /empty/],
    ['picture.srt', Uint8Array.from({ length: 2000 }, (_, i) => i * 31 % 256), /does not hold text/],
  ])('with --json gives an empty list and a warning for %s', async (name, content, warning) => {
    const { code, stdout, stderr } = await run('--json', await file(name, content))
    expect([code, stderr]).toEqual([0, ''])
    expect(JSON.parse(stdout)).toEqual({ cues: [], warnings: [expect.stringMatching(warning)] })
  })

  it('prints a list for people', async () => {
    const { code, stdout } = await run(await file('b.srt', '1\n00:00:01,000 --> 00:00:02,500\none\ntwo\n'))
    expect([code, stdout]).toEqual([0, 'SubRip, UTF-8, 1 caption\n0:01.0 – 0:02.5  one / two\n'])
  })

  it('does not cut a long answer short', async () => {
    const cues = Array.from({ length: 20_000 }, (_, i) => `00:00.000 --> 00:01.000\ncaption ${i}`).join('\n\n')
    const { stdout } = await run('--json', await file('long.vtt', `WEBVTT\n\n${cues}\n`))
    expect(JSON.parse(stdout).cues).toHaveLength(20_000)
  })

  it.each([[[]], [['a', 'b']], [['--nonsense', 'a']], [['']]])('says how it is used for %j', async (args) => {
    const { code, stdout, stderr } = await run(...args)
    expect([code, stdout, stderr]).toEqual([2, '', oneLine])
    expect(stderr).toContain('Usage: npm run --silent captions -- FILE [--json]')
  })

  it('says in one line what cannot be read', async () => {
    const refused = [join(folder, 'absent.vtt'), folder, await file('prose.srt', 'no\ncaptions\nhere\n'), await file('large.srt', new Uint8Array(10 * 1024 * 1024))]
    for (const path of refused) expect(await run(path)).toEqual({ code: 1, stdout: '', stderr: oneLine })
    expect(await run('--json', join(folder, 'absent.vtt'))).toEqual({ code: 1, stdout: '', stderr: oneLine })
  })
})
