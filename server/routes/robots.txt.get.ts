export default apiHandler((event) => {
  const site = settings().PUBLIC_URL.replace(/\/$/, '')
  setResponseHeader(event, 'Content-Type', 'text/plain; charset=utf-8')
  return ['User-agent: *', 'Disallow: /api/', 'Disallow: /builds', 'Disallow: /search', 'Disallow: /watch/*/search', `Sitemap: ${site}/sitemap.xml`, ''].join('\n')
})
