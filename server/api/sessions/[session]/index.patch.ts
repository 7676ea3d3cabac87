import { requireBuild } from '#server/services/access'
import { updateSession } from '#server/services/sessions'
import { sessionChangesSchema } from '#shared/schemas/sessions'

export default apiHandler(async (event) => {
  const session = routeId(event, 'session')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'session', session, 'work')
  const changes = await readBodyAs(event, sessionChangesSchema)
  await updateSession(db(), session, account!.id, changes)
  return { id: session }
})
