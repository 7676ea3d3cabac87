import { requireBuild } from '#server/services/access'
import { listChapters } from '#server/services/chapters'

export default apiHandler(async (event) => {
  const sessionId = routeId(event, 'session')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'session', sessionId, 'work')
  return { chapters: await listChapters(db(), { sessionId }) }
})
