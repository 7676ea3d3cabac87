import { requireBuild } from '#server/services/access'
import { updateTrack } from '#server/services/captions'
import { trackChangesSchema } from '#shared/schemas/captions'

export default apiHandler(async (event) => {
  const track = routeId(event, 'track')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'track', track, 'work')
  const changes = await readBodyAs(event, trackChangesSchema)
  await updateTrack(db(), track, account!.id, changes)
  return { id: track }
})
