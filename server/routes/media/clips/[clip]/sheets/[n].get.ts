import { z } from 'zod'
import { requireMedia, sheetAddress } from '#server/services/media'

export default apiHandler(async (event) => {
  const id = routeId(event, 'clip')
  const account = await whoAsks(event)
  const clip = await requireMedia(db(), account?.id ?? null, id)
  const n = validate(z.coerce.number({ error: 'Picture sheets are numbered from 0' }).int().min(0), getRouterParam(event, 'n'))
  return sendToStorage(event, await sheetAddress(store(), clip, n))
})
