import { search } from '#server/services/search/search'
import { searchSchema } from '#shared/schemas/search'

export default apiHandler(async (event) => {
  const account = await whoAsks(event)
  const query = readQueryAs(event, searchSchema)
  await limits().spend('search-address', addressOf(event))
  return search(db(), account?.id ?? null, query)
})
