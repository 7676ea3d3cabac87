import { requireBuild } from '#server/services/access'
import { orderParts } from '#server/services/parts'
import { orderSchema } from '#shared/schemas/plan'

export default apiHandler(async (event) => {
  const id = routeId(event, 'build')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'build', id, 'run')
  const { ids } = await readBodyAs(event, orderSchema)
  await orderParts(db(), id, ids)
  return { ordered: ids.length }
})
