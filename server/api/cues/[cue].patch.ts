import { requireBuild } from '#server/services/access'
import { updateCue } from '#server/services/cues'
import { cueChangesSchema } from '#shared/schemas/captions'

export default apiHandler(async (event) => {
  const cue = routeId(event, 'cue')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'cue', cue, 'work')
  const changes = await readBodyAs(event, cueChangesSchema)
  return updateCue(db(), cue, account!.id, changes)
})
