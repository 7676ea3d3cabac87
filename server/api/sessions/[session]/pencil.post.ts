import { requireBuild } from '#server/services/access'
import { enqueuePencilling } from '#server/services/pencil/queue'

/** Works the session's chapters out again: after a failure, or because the plan has changed. */
export default apiHandler(async (event) => {
  const sessionId = routeId(event, 'session')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'session', sessionId, 'work')
  await db().transaction(tx => enqueuePencilling(tx, sessionId))
  return { ok: true }
})
