import { clipCaptions, requireMediaOf } from '#server/services/media'

/** `/media/clips/<clip>/captions/<track>.vtt`: captions as they stand now, written by the site; for guests and followers those of inked chapters. */
export default apiHandler(async (event) => {
  const id = routeId(event, 'clip')
  const track = trackOf(getRouterParam(event, 'track') ?? '')
  const account = await whoAsks(event)
  const { clip, works } = await requireMediaOf(db(), account?.id ?? null, id)
  setResponseHeaders(event, { 'Content-Type': 'text/vtt; charset=utf-8', 'Cache-Control': 'private, no-cache' })
  return clipCaptions(db(), clip, track, { publishedOnly: !works })
})
