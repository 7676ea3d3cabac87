/** What is remembered over a reload: enough to say which files to pick again. The site's row is the truth. */
export interface Interrupted { name: string, sizeBytes: number, sessionId: string, buildId: string }

const KEY = 'ribband-uploads'
const MOST = 200

/** Uploads that were under way when the page went away. Anything odd in the browser's memory counts as nothing. */
export function readInterrupted(storage: Pick<Storage, 'getItem'>): Interrupted[] {
  try {
    const list = JSON.parse(storage.getItem(KEY) ?? '[]') as unknown
    return Array.isArray(list) ? list.filter(isInterrupted).slice(0, MOST) : []
  }
  catch {
    return []
  }
}

export function writeInterrupted(storage: Pick<Storage, 'setItem' | 'removeItem'>, list: Interrupted[]): void {
  try {
    if (list.length) storage.setItem(KEY, JSON.stringify(list.slice(0, MOST)))
    else storage.removeItem(KEY)
  }
  catch {
    // A browser without memory for us only forgets to remind.
  }
}

function isInterrupted(value: unknown): value is Interrupted {
  const entry = value as Partial<Interrupted> | null
  return typeof entry?.name === 'string' && typeof entry.sizeBytes === 'number' && typeof entry.sessionId === 'string' && typeof entry.buildId === 'string'
}
