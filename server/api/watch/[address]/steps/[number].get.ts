import { watchStep } from '#server/services/watch'
import { notFound } from '#shared/utils/errors'

export default apiHandler(async (event) => {
  const account = await whoAsks(event)
  const number = Number(getRouterParam(event, 'number'))
  if (!Number.isInteger(number) || number < 1 || number > 1_000_000) throw notFound('That step')
  return watchStep(db(), account?.id ?? null, getRouterParam(event, 'address') ?? '', number, settings().PUBLIC_URL.replace(/\/$/, ''))
})
