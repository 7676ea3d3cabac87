import { requireBuild } from '#server/services/access'
import { changePart } from '#server/services/parts'
import { changePartSchema } from '#shared/schemas/plan'

/** Changes what is given; `archived: false` brings the part back. */
export default apiHandler(async (event) => {
  const id = routeId(event, 'part')
  const account = await whoAsks(event)
  const { build } = await requireBuild(db(), account?.id ?? null, 'part', id, 'run')
  const change = await readBodyAs(event, changePartSchema)
  return changePart(db(), build.id, id, change)
})
