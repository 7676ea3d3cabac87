import { EnvironmentError, readEnvironment } from '#server/config/environment'
import { migrateDatabase } from '#server/database/migrate'
import { prepareStorage } from '../launch/storage'

/** `npm run migrate`: brings database and bucket up to date for a release; safe to run again. */
try {
  const settings = readEnvironment(process.env, { worker: true })
  await migrateDatabase(settings.DATABASE_URL)
  await prepareStorage(settings)
  console.log('Database and bucket are up to date.')
}
catch (error) {
  console.error(error instanceof EnvironmentError || error instanceof Error ? error.message : error)
  process.exit(1)
}
