import { createRequire } from 'node:module'

/**
 * Caption readers from npm behind one shape, to hold our reading against. None has types that fit,
 * so each is described here as far as it is used.
 */
export interface ReferenceCue { id: string, startMs: number, endMs: number, text: string }
export type Reference = (text: string) => ReferenceCue[] | Promise<ReferenceCue[]>

const require = createRequire(import.meta.url)
const ms = (seconds: number) => Math.round(seconds * 1000)

interface TreeNode { type: string, value?: string, children?: TreeNode[] }
interface VttParserModule {
  WebVTTParser: new () => {
    parse(text: string, mode: string): { cues: { id: string, startTime: number, endTime: number, tree: TreeNode }[], errors: { message: string }[] }
  }
}

/** webvtt-parser 2.2.0 (W3C, CC0-1.0): text as the content of the tree that it builds; in text track cue order. */
export const webvttParser: Reference = (text) => {
  const { WebVTTParser } = require('webvtt-parser') as VttParserModule
  const content = (node: TreeNode): string => node.type === 'text' ? node.value ?? '' : (node.children ?? []).map(content).join('')
  const { cues, errors } = new WebVTTParser().parse(text, 'captions')
  // It reads on after a wrong signature, unlike the standard's parser, and says so only as an error.
  if (errors.some(error => error.message.startsWith('No valid signature'))) return []
  return cues.map(cue => ({ id: cue.id, startMs: ms(cue.startTime), endMs: ms(cue.endTime), text: content({ ...cue.tree, type: 'list' }) }))
}

interface MediaCaptionsModule {
  parseText(text: string, options: { type: 'vtt' | 'srt' }): Promise<{ cues: { id: string, startTime: number, endTime: number, text: string }[] }>
}

/** media-captions 1.0.4 (MIT): text with its markup. */
export const mediaCaptions = (type: 'vtt' | 'srt'): Reference => async (text) => {
  const { parseText } = await import('media-captions') as unknown as MediaCaptionsModule
  const { cues } = await parseText(text, { type })
  return cues.map(cue => ({ id: cue.id, startMs: ms(cue.startTime), endMs: ms(cue.endTime), text: cue.text }))
}

interface NodeWebvttModule {
  parse(text: string, options: { strict: boolean, meta: boolean }): { cues: { identifier: string, start: number, end: number, text: string }[] }
}

/** node-webvtt 1.9.4 (MIT): text with its markup. */
export const nodeWebvtt: Reference = (text) => {
  const { parse } = require('node-webvtt') as NodeWebvttModule
  return parse(text, { strict: false, meta: true }).cues.map(cue => ({ id: cue.identifier, startMs: ms(cue.start), endMs: ms(cue.end), text: cue.text }))
}

interface SubtitleModule {
  parseSync(text: string): { type: string, data: { start: number, end: number, text: string } }[]
}

/** subtitle 4.2.2 (MIT): keeps no ids; text with its markup. */
export const subtitle: Reference = (text) => {
  const { parseSync } = require('subtitle') as SubtitleModule
  return parseSync(text).filter(node => node.type === 'cue').map(({ data }) => ({ id: '', startMs: data.start, endMs: data.end, text: data.text }))
}

/** A reference's cues, or what it threw: some give up on files that the standard reads. */
export async function ask(reference: Reference, text: string): Promise<ReferenceCue[] | string> {
  try {
    return await reference(text)
  }
  catch (error) {
    return `threw: ${String((error as Error).message ?? error)}`
  }
}
