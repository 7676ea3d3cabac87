import { requireBuild } from '#server/services/access'
import { completeUpload } from '#server/services/uploads'
import { completeUploadSchema } from '#shared/schemas/clips'

export default apiHandler(async (event) => {
  const clip = routeId(event, 'clip')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'clip', clip, 'work')
  const input = await readBodyAs(event, completeUploadSchema)
  return completeUpload(db(), store(), clip, account!.id, input)
})
