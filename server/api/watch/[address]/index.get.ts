import { watchBuild } from '#server/services/watch'

export default apiHandler(async (event) => {
  const account = await whoAsks(event)
  return watchBuild(db(), account?.id ?? null, getRouterParam(event, 'address') ?? '', settings().PUBLIC_URL.replace(/\/$/, ''))
})
