/** Adds the storage's address, known only at start, to what pages may load and send to. */
export default defineNitroPlugin((nitro) => {
  const storage = new URL(settings().S3_PUBLIC_ENDPOINT).origin
  nitro.hooks.hook('nuxt-security:routeRules', (rules) => {
    const all = rules['/**'] ??= {}
    const headers = all.headers || {}
    all.headers = {
      ...headers,
      contentSecurityPolicy: {
        ...headers.contentSecurityPolicy || {},
        'img-src': ['\'self\'', 'data:', 'blob:', storage],
        'media-src': ['\'self\'', 'blob:', storage],
        'connect-src': ['\'self\'', storage],
      },
    }
  })
})
