/** Pages know who asks before they are drawn. A courtesy only: every API handler decides for itself. */
export default defineNuxtRouteMiddleware(async () => {
  const { known, refresh } = useAccount()
  if (known.value) return
  try {
    await refresh()
  }
  catch {
    // The page itself will say that the site cannot be reached.
  }
})
