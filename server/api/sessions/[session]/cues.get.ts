import { requireBuild } from '#server/services/access'
import { listCues } from '#server/services/cues'

export default apiHandler(async (event) => {
  const session = routeId(event, 'session')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'session', session, 'work')
  return { cues: await listCues(db(), session) }
})
