import { readFile, stat } from 'node:fs/promises'
import { parseArgs } from 'node:util'
import type { CaptionReading } from '#shared/types/captions'
import { DomainError } from '#shared/utils/errors'
import { formatClock } from '#shared/utils/timecode'
import { orderCues } from '#server/indexing/captions/order'
import { MAX_CAPTION_BYTES, readCaptions } from '#server/indexing/captions/readCaptions'
import { fail, print } from './terminal'

/**
 * Prints what Ribband reads in a caption file: `npm run --silent captions -- FILE [--json]`.
 *
 * Cues come in the order in which a player goes through them. With --json a file without captions
 * is an empty list and a warning, so that a program that asks about many files gets an answer for
 * each; without it, it is an error. Exit 1: the file cannot be read. Exit 2: wrong arguments.
 */
const USAGE = 'Usage: npm run --silent captions -- FILE [--json]'

async function main(): Promise<void> {
  const { file, json } = readArguments()
  const bytes = await readBytes(file)
  try {
    const reading = readCaptions(bytes, { name: file })
    const cues = orderCues(reading.cues)
    await print(json ? asJson(cues, reading.warnings) : asList(reading, cues))
  }
  catch (error) {
    if (!(error instanceof DomainError)) throw error
    if (json && error.code === 'unreadable') await print(asJson([], [error.message]))
    else fail(1, `${file}: ${error.message}`)
  }
}

function readArguments(): { file: string, json: boolean } {
  try {
    const { values, positionals } = parseArgs({ options: { json: { type: 'boolean', default: false } }, allowPositionals: true })
    if (positionals.length === 1 && positionals[0]) return { file: positionals[0], json: values.json }
    return fail(2, `Name one caption file. ${USAGE}`)
  }
  catch (error) {
    return fail(2, `${(error as Error).message.split(/[.\n]/)[0]}. ${USAGE}`)
  }
}

async function readBytes(file: string): Promise<Uint8Array> {
  try {
    const { size } = await stat(file)
    // A file far over the limit is not worth reading to be refused; one byte over is enough for the message.
    if (size > 10 * MAX_CAPTION_BYTES) fail(1, `${file}: The file is far too large for captions. It was not read.`)
    return await readFile(file)
  }
  catch (error) {
    const reasons: Record<string, string> = { ENOENT: 'there is no such file', EISDIR: 'it is a folder', EACCES: 'it may not be read' }
    return fail(1, `${file}: cannot be read, ${reasons[(error as NodeJS.ErrnoException).code ?? ''] ?? (error as Error).message}.`)
  }
}

function asJson(cues: CaptionReading['cues'], warnings: string[]): string {
  return JSON.stringify({ cues: cues.map(({ id, startMs, endMs, text }) => ({ id, startMs, endMs, text })), warnings })
}

function asList(reading: CaptionReading, cues: CaptionReading['cues']): string {
  const rows = cues.map(({ startMs, endMs, text }) => `${formatClock(startMs, { tenths: true })} – ${formatClock(endMs, { tenths: true })}  ${text.replaceAll('\n', ' / ')}`)
  const { format, encoding } = reading
  const warnings = reading.warnings.map(warning => `! ${warning}`)
  return [`${format === 'vtt' ? 'WebVTT' : 'SubRip'}, ${encoding.toUpperCase()}, ${cues.length} ${cues.length === 1 ? 'caption' : 'captions'}`, ...rows, ...warnings].join('\n')
}

await main()
