import { requireBuild } from '#server/services/access'
import { originalAddress } from '#server/services/captions'

/** The caption file as it was uploaded. */
export default apiHandler(async (event) => {
  const track = routeId(event, 'track')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'track', track, 'work')
  setResponseHeader(event, 'Cache-Control', 'private, no-store')
  return sendRedirect(event, await originalAddress(db(), store(), track), 302)
})
