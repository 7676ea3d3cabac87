import { z } from 'zod'

export const captionUploadSchema = z.object({
  name: z.string().trim().min(1, 'The caption file has no name').max(255, 'The file name is longer than 255 characters: shorten it'),
})

/** A BCP 47 tag that the browser's own lists know how to write; `und` for nobody said. */
const language = z.string().trim().max(35).refine(isLanguage, 'Write the language as a tag such as en, en-GB or fr').transform(tag => Intl.getCanonicalLocales(tag)[0]!)

export const trackChangesSchema = z.object({
  clipId: z.uuid().nullable().optional(),
  language: language.optional(),
  /** Whether it belongs to its clip in spite of a doubt. */
  kept: z.boolean().optional(),
})
export type TrackChanges = z.infer<typeof trackChangesSchema>

export const captionExportSchema = z.object({ format: z.enum(['vtt', 'srt'], { error: 'Captions are exported as vtt or srt' }).default('vtt') })

export const cueChangesSchema = z.object({
  text: z.string().transform(tidy).pipe(z.string().min(1, 'A caption needs some words').max(2000, 'Keep one caption under 2,000 characters')),
  /** The version that the change was made to. */
  version: z.number().int().min(1),
})
export type CueChanges = z.infer<typeof cueChangesSchema>

function isLanguage(tag: string): boolean {
  try {
    return Intl.getCanonicalLocales(tag).length === 1
  }
  catch {
    return false
  }
}

/** Line ends as one kind, no blank lines (they would end the caption in a file), no stray spaces. */
function tidy(text: string): string {
  return text.replace(/\r\n?/g, '\n').split('\n').map(line => line.trim()).filter(line => line !== '').join('\n')
}
