import { listedPages } from '#server/services/watch'
import { writeSitemap } from '#shared/utils/sitemap'

export default apiHandler(async (event) => {
  const site = settings().PUBLIC_URL.replace(/\/$/, '')
  setResponseHeader(event, 'Content-Type', 'application/xml; charset=utf-8')
  return writeSitemap(site, [{ path: '/' }, { path: '/watch' }, ...await listedPages(db())])
})
