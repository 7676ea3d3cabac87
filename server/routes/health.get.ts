import { sql } from 'drizzle-orm'

/** For load balancers and the start command: 200 when database and storage answer. */
export default defineEventHandler(async (event) => {
  const [database, storage] = await Promise.allSettled([db().execute(sql`select 1`), store().ping()])
  const well = database.status === 'fulfilled' && storage.status === 'fulfilled'
  setResponseStatus(event, well ? 200 : 503)
  return { database: database.status === 'fulfilled', storage: storage.status === 'fulfilled' }
})
