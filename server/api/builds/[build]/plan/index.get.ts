import { requireBuild } from '#server/services/access'
import { readPlanView } from '#server/services/plan'

/** Steps and parts in order. Archived ones only for builder and crew. */
export default apiHandler(async (event) => {
  const id = routeId(event, 'build')
  const account = await whoAsks(event)
  const { role } = await requireBuild(db(), account?.id ?? null, 'build', id, 'watch')
  return readPlanView(db(), id, { archived: role === 'builder' || role === 'crew' })
})
