import type { StripLayout } from '#shared/utils/ribband/layout'
import type { View } from '#shared/utils/ribband/scale'
import type { Strip } from '#shared/utils/ribband/strip'

export const TONES = ['floor', 'sheet', 'well', 'ink', 'ink-soft', 'ink-faint', 'rule', 'rule-strong', 'lead', 'lead-wash', 'bottle', 'bottle-wash', 'bottle-on', 'brass', 'brass-wash', 'brass-on'] as const
export type Tone = typeof TONES[number]

/** Colours and faces as the page's theme has them at this moment. */
export interface Theme {
  tone: (tone: Tone, alpha?: number) => string
  text: string
  figures: string
}

/** What every layer of the drawing is given. */
export interface Pen {
  ctx: CanvasRenderingContext2D
  theme: Theme
  strip: Strip
  layout: StripLayout
  view: View
}

export const wordFont = (theme: Theme): string => `600 13px ${theme.text}`
export const titleFont = (theme: Theme): string => `400 13px ${theme.text}`
export const captionFont = (theme: Theme): string => `400 12.5px ${theme.text}`
export const figureFont = (theme: Theme, px = 13, weight = 500): string => `${weight} ${px}px ${theme.figures}`

const widths = new Map<string, number>()
const MOST_WIDTHS = 20_000

/** Width of a text in CSS pixels; remembered, because measuring is the dearest part of setting words. */
export function textWidth(ctx: CanvasRenderingContext2D, text: string, font: string): number {
  const key = `${font}\n${text}`
  const known = widths.get(key)
  if (known !== undefined) return known
  if (widths.size > MOST_WIDTHS) widths.clear()
  ctx.font = font
  const width = ctx.measureText(text).width
  widths.set(key, width)
  return width
}

/** Widths measured before the page's own faces came are wrong. */
export function forgetWidths(): void {
  widths.clear()
}

/** Half a pixel off, so that a hairline fills one pixel instead of two halves. */
export const crisp = (value: number): number => Math.round(value) + 0.5

/** Clears a canvas to its CSS size, sharp at any pixel ratio. */
export function prepare(canvas: HTMLCanvasElement, width: number, height: number): CanvasRenderingContext2D | null {
  const ratio = Math.min(3, globalThis.devicePixelRatio || 1)
  const [w, h] = [Math.round(width * ratio), Math.round(height * ratio)]
  const ctx = canvas.getContext('2d')
  if (!ctx) return null
  if (canvas.width !== w || canvas.height !== h) {
    canvas.width = w
    canvas.height = h
  }
  ctx.setTransform(ratio, 0, 0, ratio, 0, 0)
  ctx.clearRect(0, 0, width, height)
  return ctx
}
