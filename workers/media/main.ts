import { tmpdir } from 'node:os'
import { openStorage } from '#server/adapters/openStorage'
import { EnvironmentError, readEnvironment } from '#server/config/environment'
import { openDatabase } from '#server/database/client'
import { Originals } from './originals'
import { startMediaWorker } from './runner'

/*
 * The media worker: `node --import tsx workers/media/main.ts`. Settings come from the environment (.env.example);
 * WORKER_TEMP_DIR says where local copies of clips lie. Run as many as you like, on as many machines.
 */

/** A stop that takes longer than this is cut off; the next worker takes over. */
const STOP_MS = 20_000
/** Connections beside those of running jobs: the queue's own, looking after dead workers, progress. */
const SPARE_CONNECTIONS = 5

function settings() {
  try {
    return readEnvironment(process.env, { worker: true })
  }
  catch (error) {
    if (!(error instanceof EnvironmentError)) throw error
    console.error(error.message)
    process.exit(1)
  }
}

const env = settings()
const log = (line: string) => console.error(`[worker ${process.pid}] ${line}`)
const handle = openDatabase(env.DATABASE_URL, { max: env.WORKER_CONCURRENCY * 2 + SPARE_CONNECTIONS, onIdleError: error => log(`A connection was lost: ${error.message}`) })
// A connection that breaks while the queue uses it would otherwise end the process.
handle.pool.on('connect', client => void client.on('error', () => {}))
const storage = openStorage(env)
const originals = await Originals.open(storage, process.env.WORKER_TEMP_DIR || tmpdir())
const worker = await startMediaWorker({ database: handle.database, storage, originals }, handle, { url: env.DATABASE_URL, concurrency: env.WORKER_CONCURRENCY, log })

let stopping = false
async function stop(): Promise<void> {
  if (stopping) return
  stopping = true
  setTimeout(() => process.exit(1), STOP_MS).unref()
  await worker.stop()
  await originals.close()
  await handle.close()
  storage.close()
  process.exit(0)
}
process.on('SIGTERM', () => void stop())
process.on('SIGINT', () => void stop())
console.log(JSON.stringify({ ready: true }))
