import { requireBuild } from '#server/services/access'
import { changePickup } from '#server/services/pickups'
import { pickupChangesSchema } from '#shared/schemas/facts'

export default apiHandler(async (event) => {
  const pickup = routeId(event, 'pickup')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'pickup', pickup, 'work')
  const changes = await readBodyAs(event, pickupChangesSchema)
  return changePickup(db(), pickup, account!.id, changes)
})
