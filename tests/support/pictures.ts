import { execa } from 'execa'

/** Brightness of a picture file (or of one frame of a clip) on a grid: `columns` × `rows` averages of 0 – 255. */
export async function brightnessGrid(path: string, columns: number, rows: number, before: string[] = [], crop = ''): Promise<number[][]> {
  const { stdout } = await execa('ffmpeg', [
    '-nostdin', '-v', 'error', ...before, '-i', `file:${path}`, '-frames:v', '1',
    '-vf', `${crop}scale=${columns}:${rows}:flags=area,format=gray`, '-f', 'rawvideo', 'pipe:1',
  ], { encoding: 'buffer' })
  return Array.from({ length: rows }, (_, row) => [...stdout.subarray(row * columns, (row + 1) * columns)])
}

/** Reads the frame number that a `numbered` clip (tests/support/clips.ts) spells in 16 black or white columns. */
export function readFrameNumber(row: number[]): number {
  return row.reduce((number, brightness) => number * 2 + (brightness > 127 ? 1 : 0), 0)
}

/** Frame numbers shown by the tiles of a picture sheet of a `numbered` clip, row by row. */
export async function readSheet(path: string, columns: number, count: number): Promise<number[]> {
  const rows = Math.ceil(count / columns)
  const grid = await brightnessGrid(path, columns * 16, rows)
  return grid.flatMap(row => Array.from({ length: columns }, (_, column) => readFrameNumber(row.slice(column * 16, column * 16 + 16)))).slice(0, count)
}
