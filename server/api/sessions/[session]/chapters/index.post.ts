import { requireBuild } from '#server/services/access'
import { changeChapters } from '#server/services/chapters'
import { chapterChangesSchema } from '#shared/schemas/chapters'

export default apiHandler(async (event) => {
  const sessionId = routeId(event, 'session')
  const account = await requireAccount(event)
  const { role } = await requireBuild(db(), account.id, 'session', sessionId, 'work')
  const changes = await readBodyAs(event, chapterChangesSchema)
  return changeChapters(db(), sessionId, { id: account.id, role }, changes)
})
