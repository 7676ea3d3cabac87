import { requireBuild } from '#server/services/access'
import { orderSteps } from '#server/services/plan'
import { orderSchema } from '#shared/schemas/plan'

export default apiHandler(async (event) => {
  const id = routeId(event, 'build')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'build', id, 'run')
  const { ids } = await readBodyAs(event, orderSchema)
  await orderSteps(db(), id, ids)
  return { ordered: ids.length }
})
