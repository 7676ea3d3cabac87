import { requireBuild } from '#server/services/access'
import { changeFact } from '#server/services/facts'
import { factChangesSchema } from '#shared/schemas/facts'

export default apiHandler(async (event) => {
  const fact = routeId(event, 'fact')
  const account = await whoAsks(event)
  const { role } = await requireBuild(db(), account?.id ?? null, 'fact', fact, 'work')
  const changes = await readBodyAs(event, factChangesSchema)
  return changeFact(db(), fact, { id: account!.id, role }, changes)
})
