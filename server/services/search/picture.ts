import { sql } from 'drizzle-orm'
import type { Picture } from '#shared/types/search'
import { clips } from '../../database/schema'

/** What a picture needs of a clip's footage, without its long lists of times. */
export interface PictureSource {
  poster: { width: number, height: number } | null
  sheets: { intervalMs: number, tileWidth: number, tileHeight: number, columns: number, rows: number, count: number } | null
}

/** Selects a `PictureSource` of a clip. */
export const pictureColumns = {
  poster: sql<PictureSource['poster']>`${clips.footage}->'poster'`,
  sheets: sql<PictureSource['sheets']>`case when jsonb_typeof(${clips.footage}->'sheets') = 'object' then (${clips.footage}->'sheets') - 'timesMs' - 'images' end`,
}

/** The picture of a moment: the tile of its sheet that lies nearest before it, else the clip's poster. */
export function pictureAt(clipId: string, { poster, sheets }: PictureSource, atMs: number): Picture | null {
  if (sheets && sheets.count > 0 && sheets.intervalMs > 0) {
    const tile = Math.min(sheets.count - 1, Math.max(0, Math.round(atMs / sheets.intervalMs)))
    const perSheet = sheets.columns * sheets.rows
    const place = tile % perSheet
    const sheet = Math.floor(tile / perSheet)
    return {
      kind: 'tile', url: `/media/clips/${clipId}/sheets/${sheet}`,
      column: place % sheets.columns, row: Math.floor(place / sheets.columns), columns: sheets.columns, width: sheets.tileWidth, height: sheets.tileHeight,
    }
  }
  return poster ? { kind: 'poster', url: `/media/clips/${clipId}/poster`, width: poster.width, height: poster.height } : null
}
