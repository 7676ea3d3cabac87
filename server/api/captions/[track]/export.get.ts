import { requireBuild } from '#server/services/access'
import { exportTrack } from '#server/services/cues'
import { captionExportSchema } from '#shared/schemas/captions'

/** The captions as they stand now, with corrections, as a file. */
export default apiHandler(async (event) => {
  const track = routeId(event, 'track')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'track', track, 'work')
  const { format } = readQueryAs(event, captionExportSchema)
  const file = await exportTrack(db(), track, format)
  setResponseHeaders(event, { 'Content-Type': file.type, 'Content-Disposition': attachment(file.name), 'Cache-Control': 'private, no-store' })
  return file.text
})
