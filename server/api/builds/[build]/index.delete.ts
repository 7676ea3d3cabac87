import { requireBuild } from '#server/services/access'
import { deleteBuild } from '#server/services/builds'
import { deleteBuildSchema } from '#shared/schemas/builds'

export default apiHandler(async (event) => {
  const id = routeId(event, 'build')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'build', id, 'run')
  const { name } = await readBodyAs(event, deleteBuildSchema)
  const { storageCleared } = await deleteBuild(db(), store(), id, name)
  if (!storageCleared) console.warn(`[${event.context.requestId ?? '-'}] build ${id} is deleted, but not all of its files could be removed from the storage`)
  return { deleted: true }
})
