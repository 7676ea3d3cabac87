import { requireBuild } from '#server/services/access'
import { deleteSession } from '#server/services/sessions'

export default apiHandler(async (event) => {
  const session = routeId(event, 'session')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'session', session, 'run')
  await deleteSession(db(), session, account!.id)
  return { id: session }
})
