import { watchMoment } from '#server/services/watch'

export default apiHandler(async (event) => {
  const account = await whoAsks(event)
  const clipId = routeId(event, 'clip')
  return watchMoment(db(), account?.id ?? null, getRouterParam(event, 'address') ?? '', clipId, settings().PUBLIC_URL.replace(/\/$/, ''))
})
