import { requireBuild } from '#server/services/access'
import { exportTable } from '#server/services/planImport'
import { planExportSchema } from '#shared/schemas/plan'

const TYPES = { csv: 'text/csv; charset=utf-8', md: 'text/markdown; charset=utf-8' }

/** The steps or parts in use as a file to keep, which can be imported again. */
export default apiHandler(async (event) => {
  const id = routeId(event, 'build')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'build', id, 'watch')
  const { what, format } = readQueryAs(event, planExportSchema)
  const text = await exportTable(db(), id, what, format)
  setResponseHeaders(event, {
    'Content-Type': TYPES[format],
    'Content-Disposition': `attachment; filename="${what === 'steps' ? 'plan' : 'parts'}.${format}"`,
    'Cache-Control': 'private, no-store',
  })
  return text
})
