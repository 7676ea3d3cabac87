import { peaksAddress, requireMedia } from '#server/services/media'

export default apiHandler(async (event) => {
  const id = routeId(event, 'clip')
  const account = await whoAsks(event)
  const clip = await requireMedia(db(), account?.id ?? null, id)
  return sendToStorage(event, await peaksAddress(store(), clip))
})
