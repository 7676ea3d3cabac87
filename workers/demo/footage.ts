import { mkdir, writeFile } from 'node:fs/promises'
import { fileURLToPath } from 'node:url'
import { parseArgs } from 'node:util'
import { writeSrt, writeVtt } from '#server/indexing/captions/writeCaptions'
import { timeScript, type TimedClip } from './times'

/**
 * npm run demo:footage: speaks, draws and joins the demo's clips and writes their captions and chapter times.
 * `-- --times` writes captions and chapter times only; `-- --clip NAME` makes one clip.
 */
const { values: options } = parseArgs({ options: { times: { type: 'boolean' }, clip: { type: 'string' } } })
const folder = fileURLToPath(new URL('./footage/', import.meta.url))

async function main(): Promise<void> {
  await mkdir(folder, { recursive: true })
  const clips = await timeScript()
  await writeTimes(clips)
  if (options.times) return
  const { filmClip } = await import('./film')
  for (const timed of clips) {
    if (options.clip && !timed.clip.file.includes(options.clip)) continue
    await filmClip(timed, clips, folder)
  }
}

async function writeTimes(clips: TimedClip[]): Promise<void> {
  const chapters = Object.fromEntries(clips.map(({ clip, timeline }) => [clip.file, { durationMs: timeline.durationMs, chapters: timeline.chapters }]))
  await writeFile(`${folder}chapters.json`, `${JSON.stringify(chapters, null, 2)}\n`)
  for (const { clip, timeline } of clips) await writeFile(folder + clip.captions, clip.captions.endsWith('.srt') ? writeSrt(timeline.cues) : writeVtt(timeline.cues.map(cue => ({ ...cue, id: '' }))))
}

await main()
