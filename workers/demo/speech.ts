import { execFile } from 'node:child_process'
import { promisify } from 'node:util'
import type { Speaker } from './types'

const run = promisify(execFile)

/** Sound at `RATE` samples a second, one channel, −1 to 1. */
export type Samples = Float32Array
export const RATE = 22_050

const VOICES: Record<Speaker, string[]> = {
  maud: ['-v', 'en-gb-x-rp+Annie', '-s', '174', '-p', '46', '-g', '2'],
  ivo: ['-v', 'en-gb-scotland+Andy', '-s', '166', '-p', '36', '-g', '2'],
}

const FRACTIONS: Record<string, [alone: string, after: string]> = {
  '1/2': ['half', 'a half'],
  '1/4': ['a quarter of an inch', 'a quarter'],
  '3/4': ['three quarters', 'three quarters'],
  '1/8': ['eighth', 'an eighth'],
  '3/8': ['three eighths', 'three eighths'],
  '5/8': ['five eighths', 'five eighths'],
  '7/8': ['seven eighths', 'seven eighths'],
  '1/16': ['sixteenth', 'a sixteenth'],
}

/** A caption's text as a person says it: `18 1/8` is "18 and an eighth". */
export function speakable(text: string): string {
  return text
    .replace(/(\d+) (\d+\/\d+)/g, (all, whole: string, fraction: string) => fraction in FRACTIONS ? `${whole} and ${FRACTIONS[fraction]![1]}` : all)
    .replace(/\d+\/\d+/g, fraction => FRACTIONS[fraction]?.[0] ?? fraction)
    .replace(/(\d) mm\b/g, '$1 mil')
}

/** The sentence spoken by espeak-ng, without the silence it leaves at either end. */
export async function speak(text: string, speaker: Speaker): Promise<Samples> {
  const { stdout } = await run('espeak-ng', [...VOICES[speaker], '--stdout', speakable(text)], { encoding: 'buffer', maxBuffer: 32 << 20 })
  const rate = stdout.readUInt32LE(24)
  if (rate !== RATE) throw new Error(`espeak-ng spoke at ${rate} samples a second; ${RATE} was expected.`)
  return trimmed(fromPcm(stdout.subarray(44)))
}

function fromPcm(pcm: Buffer): Samples {
  const out = new Float32Array(pcm.length >> 1)
  for (let i = 0; i < out.length; i++) out[i] = pcm.readInt16LE(i * 2) / 32_768
  return out
}

function trimmed(samples: Samples): Samples {
  const loud = (value: number) => Math.abs(value) > 0.006
  const first = samples.findIndex(loud)
  if (first < 0) return samples
  return samples.slice(first, samples.findLastIndex(loud) + 1)
}
