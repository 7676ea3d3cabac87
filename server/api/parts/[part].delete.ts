import { requireBuild } from '#server/services/access'
import { changePart } from '#server/services/parts'

/** Archives the part: it leaves the lists, and what points at it stays whole. */
export default apiHandler(async (event) => {
  const id = routeId(event, 'part')
  const account = await whoAsks(event)
  const { build } = await requireBuild(db(), account?.id ?? null, 'part', id, 'run')
  return changePart(db(), build.id, id, { archived: true })
})
