/** Why a part did not arrive. `refused` carries the storage's status: 403 for an address past its time. */
export class PartProblem extends Error {
  constructor(readonly kind: 'unreachable' | 'refused', readonly status: number) {
    super(kind === 'refused' ? `The storage answered ${status}` : 'The storage could not be reached')
    this.name = 'PartProblem'
  }
}

/** Without a byte moving for so long the connection is dead, whatever the browser thinks. */
const STALLED_MS = 60_000

/**
 * PUTs one piece of a file to a presigned address and answers its ETag. XMLHttpRequest because fetch tells nothing
 * of what has left; the browser reads the piece from disk as it goes.
 */
export function putPart(url: string, piece: Blob, options: { signal: AbortSignal, onSent: (bytes: number) => void }): Promise<string> {
  return new Promise((resolve, reject) => {
    const { signal, onSent } = options
    if (signal.aborted) return reject(signal.reason)
    const request = new XMLHttpRequest()
    let stalled: ReturnType<typeof setTimeout>
    const watch = () => {
      clearTimeout(stalled)
      stalled = setTimeout(() => request.abort(), STALLED_MS)
    }
    const stop = () => request.abort()
    const end = (act: () => void) => {
      clearTimeout(stalled)
      signal.removeEventListener('abort', stop)
      act()
    }
    signal.addEventListener('abort', stop, { once: true })
    request.upload.onprogress = (event) => {
      watch()
      onSent(event.loaded)
    }
    request.onload = () => end(() => {
      const etag = request.getResponseHeader('ETag')
      if (request.status >= 200 && request.status < 300 && etag) resolve(etag)
      else reject(new PartProblem('refused', request.status))
    })
    request.onerror = () => end(() => reject(new PartProblem('unreachable', 0)))
    request.onabort = () => end(() => reject(signal.aborted ? signal.reason : new PartProblem('unreachable', 0)))
    request.open('PUT', url)
    request.send(piece)
    watch()
  })
}
