/** Addresses in one file, as https://www.sitemaps.org/protocol.html allows. */
const MOST = 50_000

/** Writes a sitemap (https://www.sitemaps.org/protocol.html) of a site's pages; those beyond 50,000 are left out. */
export function writeSitemap(site: string, pages: { path: string, changed?: Date }[]): string {
  const urls = pages.slice(0, MOST).map(({ path, changed }) =>
    `  <url><loc>${escape(site + path)}</loc>${changed ? `<lastmod>${changed.toISOString()}</lastmod>` : ''}</url>`)
  return ['<?xml version="1.0" encoding="UTF-8"?>', '<urlset xmlns="http://www.sitemaps.org/schemas/sitemap/0.9">', ...urls, '</urlset>', ''].join('\n')
}

function escape(text: string): string {
  return text.replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('>', '&gt;').replaceAll('"', '&quot;').replaceAll('\'', '&apos;')
}
