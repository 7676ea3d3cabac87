import { requireBuild } from '#server/services/access'
import { deleteBuild } from '#server/services/builds'
import { deleteBuildSchema } from '#shared/schemas/builds'

export default apiHandler(async (event) => {
  const id = routeId(event, 'build')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'build', id, 'run')
  const { name } = await readBodyAs(event, deleteBuildSchema)
  const { leftOver } = await deleteBuild(db(), store(), id, name)
  if (leftOver) console.warn(`[${event.context.requestId ?? '-'}] build ${id} is deleted, but ${leftOver} of its files could not be removed from the storage`)
  return { deleted: true }
})
