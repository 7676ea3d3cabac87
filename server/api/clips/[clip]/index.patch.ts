import { requireBuild } from '#server/services/access'
import { updateClip } from '#server/services/clips'
import { clipChangesSchema } from '#shared/schemas/clips'

export default apiHandler(async (event) => {
  const clip = routeId(event, 'clip')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'clip', clip, 'work')
  const changes = await readBodyAs(event, clipChangesSchema)
  await updateClip(db(), clip, account!.id, changes)
  return { id: clip }
})
