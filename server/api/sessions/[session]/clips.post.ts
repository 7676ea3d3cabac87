import { requireBuild } from '#server/services/access'
import { beginUpload } from '#server/services/uploads'
import { beginUploadSchema } from '#shared/schemas/clips'

/** Begins the upload of one file, or finds it again. */
export default apiHandler(async (event) => {
  const session = routeId(event, 'session')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'session', session, 'work')
  const input = await readBodyAs(event, beginUploadSchema)
  return beginUpload(db(), store(), session, account!.id, input)
})
