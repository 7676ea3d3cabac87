import { requireBuild } from '#server/services/access'
import { listParts } from '#server/services/parts'

/** Parts in order. Archived ones only for builder and crew. */
export default apiHandler(async (event) => {
  const id = routeId(event, 'build')
  const account = await whoAsks(event)
  const { role } = await requireBuild(db(), account?.id ?? null, 'build', id, 'watch')
  return { parts: await listParts(db(), id, { archived: role === 'builder' || role === 'crew' }) }
})
