import { requireBuild } from '#server/services/access'
import { previewImport } from '#server/services/planImport'
import { planSourceSchema } from '#shared/schemas/plan'

/** What an import would do. Writes nothing. */
export default apiHandler(async (event) => {
  const id = routeId(event, 'build')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'build', id, 'run')
  const source = await readBodyAs(event, planSourceSchema)
  return previewImport(db(), id, source)
})
