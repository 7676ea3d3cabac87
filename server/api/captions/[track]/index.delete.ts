import { requireBuild } from '#server/services/access'
import { deleteTrack } from '#server/services/captions'

export default apiHandler(async (event) => {
  const track = routeId(event, 'track')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'track', track, 'run')
  await deleteTrack(db(), track, account!.id)
  return { id: track }
})
