import { requireBuild } from '#server/services/access'
import { importTable } from '#server/services/planImport'
import { planSourceSchema } from '#shared/schemas/plan'

export default apiHandler(async (event) => {
  const id = routeId(event, 'build')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'build', id, 'run')
  const source = await readBodyAs(event, planSourceSchema)
  return importTable(db(), id, source)
})
