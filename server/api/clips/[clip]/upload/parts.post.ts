import { requireBuild } from '#server/services/access'
import { partAddresses } from '#server/services/uploads'
import { partAddressesSchema } from '#shared/schemas/clips'

export default apiHandler(async (event) => {
  const clip = routeId(event, 'clip')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'clip', clip, 'work')
  const { partNumbers } = await readBodyAs(event, partAddressesSchema)
  return partAddresses(db(), store(), clip, partNumbers)
})
