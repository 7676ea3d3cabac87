import { mkdtemp, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { readPlanFiles, stepNumbers } from '../../../../workers/commands/planFiles'
import { ending } from './ending'

const USAGE = 'Usage: so'
let folder: string

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'plan-files-'))
})
afterAll(() => rm(folder, { recursive: true }))

const file = async (name: string, content: string): Promise<string> => {
  const path = join(folder, name)
  await writeFile(path, content)
  return path
}

describe('stepNumbers', () => {
  it.each([
    ['6,7,9-12', [6, 7, 9, 10, 11, 12]], ['3', [3]], [' 1 , 2 ', [1, 2]], ['2-2', [2]], ['5,4-6,5', [5, 4, 6]], ['1,,2,', [1, 2]], ['', []],
  ])('reads %j', (list, numbers) => expect(stepNumbers(list, USAGE)).toEqual(numbers))

  it.each(['a', '3-1', '1-2-3', '-4', '1.5', '12345', '6;7', '9 - 12'])('ends with one line and 2 for %j', async (list) => {
    expect(await ending(() => stepNumbers(list, USAGE))).toEqual({ code: 2, said: `--steps: “${list}” is not a step number or a range such as 9-12. ${USAGE}\n` })
  })
})

describe('readPlanFiles', () => {
  const plan = () => file('plan.csv', 'number,stage,title,description,parts,materials\n1,Hull,Cut the keel,,keel,oak\n2,,Varnish,Three coats,,\n')
  const parts = () => file('parts.csv', 'name,aliases,material,thickness_mm\nkeel,hog;backbone,oak,25\n')

  it('gives steps, parts and the captions of every clip in the order of a player', async () => {
    const captions = await file('a.vtt', 'WEBVTT\n\n00:05.000 --> 00:06.000\nlater\n\n00:01.000 --> 00:02.000\nfirst\n')
    const more = await file('b.srt', '1\n00:00:01,000 --> 00:00:02,500\nsecond clip\n')
    const read = await readPlanFiles({ plan: await plan(), parts: await parts(), captions: [captions, more] }, USAGE)
    expect(read.steps).toEqual([
      { number: 1, stage: 'Hull', title: 'Cut the keel', description: '', parts: ['keel'], materials: ['oak'] },
      { number: 2, stage: '', title: 'Varnish', description: 'Three coats', parts: [], materials: [] },
    ])
    expect(read.parts).toEqual([{ name: 'keel', aliases: ['hog', 'backbone'], material: 'oak', thicknessMm: 25 }])
    expect(read.clips).toEqual([
      { cues: [{ startMs: 1000, endMs: 2000, text: 'first' }, { startMs: 5000, endMs: 6000, text: 'later' }] },
      { cues: [{ startMs: 1000, endMs: 2500, text: 'second clip' }] },
    ])
  })

  it('ends with 2 for files that cannot be opened, and says why', async () => {
    for (const [path, reason] of [[join(folder, 'absent'), 'there is no such file'], [folder, 'it is a folder']] as const) {
      expect(await ending(async () => readPlanFiles({ plan: path, parts: await parts(), captions: [] }, USAGE))).toEqual({ code: 2, said: `${path}: ${reason}. ${USAGE}\n` })
    }
  })

  it('ends with 1 for files that hold no such thing, in one line that names file and row', async () => {
    const wrong = await file('wrong.csv', 'number,title\nx,Cut\ny,Glue\nz,Sand\nw,Paint\n')
    const ended = await ending(async () => readPlanFiles({ plan: wrong, parts: await parts(), captions: [] }, USAGE))
    expect(ended!.code).toBe(1)
    expect(ended!.said).toMatch(/^[^\n]*wrong\.csv, row 2: [^\n]+\n$/)
    const empty = await file('empty.vtt', '')
    const silent = await ending(async () => readPlanFiles({ plan: await plan(), parts: await parts(), captions: [empty] }, USAGE))
    if (silent) expect(silent).toEqual({ code: 1, said: expect.stringMatching(/^[^\n]*empty\.vtt: [^\n]+\n$/) })
  })
})
