import { startTestServer } from './database'

/** Starts one PostgreSQL for the run; each file clones its own database from the template. */
export default async function setup() {
  const server = await startTestServer()
  process.env.TEST_DATABASE_URL = server.url
  return () => server.stop()
}
