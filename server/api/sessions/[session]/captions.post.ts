import { requireBuild } from '#server/services/access'
import { addCaptionFile } from '#server/services/captions'
import { MAX_CAPTION_BYTES } from '#server/indexing/captions/readCaptions'
import { captionUploadSchema } from '#shared/schemas/captions'

/** Takes one caption file: its bytes as the body, its name in the query. */
export default apiHandler(async (event) => {
  const session = routeId(event, 'session')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'session', session, 'work')
  const { name } = readQueryAs(event, captionUploadSchema)
  const bytes = await readBytes(event, MAX_CAPTION_BYTES, most => `${name} has more than ${most} MB, which no clip’s captions need, so it was not kept. Check that it is a caption file.`)
  setResponseStatus(event, 201)
  return addCaptionFile(db(), store(), session, account!.id, { name, bytes })
})
