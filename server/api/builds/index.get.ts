import { listBuilds } from '#server/services/builds'

/** The builds of the one who asks. */
export default apiHandler(async (event) => {
  const account = await requireAccount(event)
  return { builds: await listBuilds(db(), account.id) }
})
