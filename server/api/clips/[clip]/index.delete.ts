import { requireBuild } from '#server/services/access'
import { deleteClip, isUploading } from '#server/services/clips'

/** Crew may cancel what is still being uploaded; a clip that stands is the builder's to remove. */
export default apiHandler(async (event) => {
  const clip = routeId(event, 'clip')
  const account = await whoAsks(event)
  const userId = account?.id ?? null
  await requireBuild(db(), userId, 'clip', clip, 'work')
  if (!await isUploading(db(), clip)) await requireBuild(db(), userId, 'clip', clip, 'run')
  await deleteClip(db(), clip, account!.id)
  return { id: clip }
})
