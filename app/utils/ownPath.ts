/**
 * Where to go after signing in: an address on this site and nowhere else, so that a link from outside
 * cannot use our sign-in page to send people away. Anything else becomes `otherwise`.
 */
export function ownPath(to: unknown, otherwise = '/builds'): string {
  if (typeof to !== 'string' || !to.startsWith('/')) return otherwise
  const here = 'http://own.invalid'
  const url = URL.canParse(to, here) ? new URL(to, here) : null
  // The parser reads `//elsewhere` and `/\elsewhere` as browsers do: as another site.
  if (url?.origin !== here) return otherwise
  const path = `${url.pathname}${url.search}${url.hash}`
  // Dots may fold away to a second slash at the front (`/.//elsewhere`).
  return path.startsWith('//') || /^\/(?:sign-in|sign-up)(?:$|[?#/])/.test(path) ? otherwise : path
}
