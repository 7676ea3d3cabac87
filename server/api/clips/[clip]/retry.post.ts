import { requireBuild } from '#server/services/access'
import { retryClip } from '#server/services/clipTasks'

/** Puts a clip's failed tasks back in the queue. */
export default apiHandler(async (event) => {
  const clip = routeId(event, 'clip')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'clip', clip, 'work')
  return { retried: await retryClip(db(), clip, account!.id) }
})
