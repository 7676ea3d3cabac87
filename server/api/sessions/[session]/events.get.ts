import { requireBuild } from '#server/services/access'

/** Server-sent events of one session: progress, clips, chapters, captions. The page re-reads what is named. */
export default apiHandler(async (event) => {
  const session = routeId(event, 'session')
  const account = await whoAsks(event)
  await requireBuild(db(), account?.id ?? null, 'session', session, 'work')
  const stream = createEventStream(event)
  const stop = live().watch(session, message => void stream.push(JSON.stringify(message === 'gap' ? { kind: 'gap' } : message)))
  // Proxies drop quiet connections; a comment a quarter of a minute keeps this one.
  const beat = setInterval(() => void stream.push(JSON.stringify({ kind: 'beat' })), 15_000)
  stream.onClosed(async () => {
    clearInterval(beat)
    stop()
    await stream.close()
  })
  void stream.push(JSON.stringify({ kind: 'hello' }))
  return stream.send()
})
