import { preconditionFailed } from './errors'

export interface Validators { etag: string, lastModified: Date }

function listsEtag(header: string, etag: string): boolean {
  return header.split(',').map(item => item.trim().replace(/^W\//, '')).some(item => item === '*' || item.replace(/^"|"$/g, '') === etag)
}

const wholeSeconds = (date: Date) => Math.floor(date.getTime() / 1000) * 1000

/**
 * Conditions on reading, in the order of RFC 9110 section 13.2.2.
 * Throws 412; returns false when the answer is 304 Not Modified. `prefix` serves CopyObject.
 */
export function mayRead(headers: Record<string, string | undefined>, current: Validators, prefix = ''): boolean {
  const given = (name: string) => headers[prefix + name]
  const [match, noneMatch] = [given('if-match'), given('if-none-match')]
  const modified = wholeSeconds(current.lastModified)
  if (match !== undefined) {
    if (!listsEtag(match, current.etag)) throw preconditionFailed()
  }
  else if (given('if-unmodified-since') !== undefined) {
    if (modified > Date.parse(given('if-unmodified-since')!)) throw preconditionFailed()
  }
  if (noneMatch !== undefined) return !listsEtag(noneMatch, current.etag)
  if (given('if-modified-since') !== undefined) return !(modified <= Date.parse(given('if-modified-since')!))
  return true
}

/** Conditions on replacing an object; `current` is null when there is none. */
export function assertMayWrite(headers: Record<string, string | undefined>, current: Validators | null): void {
  const [match, noneMatch] = [headers['if-match'], headers['if-none-match']]
  if (match !== undefined && !(current && listsEtag(match, current.etag))) throw preconditionFailed()
  if (noneMatch !== undefined && current && listsEtag(noneMatch, current.etag)) throw preconditionFailed()
}

/** RFC 9110 section 13.1.5: a Range counts only while the object is still the one the client knows. */
export function rangeStillValid(header: string | undefined, current: Validators): boolean {
  if (header === undefined) return true
  if (header.startsWith('"')) return header === `"${current.etag}"`
  return Date.parse(header) === wholeSeconds(current.lastModified)
}
