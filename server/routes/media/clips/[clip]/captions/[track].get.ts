import { clipCaptions, requireMedia } from '#server/services/media'

/** `/media/clips/<clip>/captions/<track>.vtt`: captions as they stand now, written by the site. */
export default apiHandler(async (event) => {
  const id = routeId(event, 'clip')
  const track = trackOf(getRouterParam(event, 'track') ?? '')
  const account = await whoAsks(event)
  const clip = await requireMedia(db(), account?.id ?? null, id)
  setResponseHeaders(event, { 'Content-Type': 'text/vtt; charset=utf-8', 'Cache-Control': 'private, no-cache' })
  return clipCaptions(db(), clip, track)
})
