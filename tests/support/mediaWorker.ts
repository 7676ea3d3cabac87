import { type ChildProcess, spawn } from 'node:child_process'
import { createInterface } from 'node:readline'
import type { TestDatabase } from './database'
import type { TestStorage } from './storage'

export interface TestWorker {
  process: ChildProcess
  /** What it wrote to standard error. */
  log: () => string
  /** Sends the signal and waits for the end. */
  stop: (signal?: NodeJS.Signals) => Promise<number | null>
}

/** A real media worker in a process of its own, ready for jobs. */
export async function startTestWorker(database: TestDatabase, storage: TestStorage, options: { concurrency?: number, tempDir: string }): Promise<TestWorker> {
  const { config } = storage
  const child = spawn(process.execPath, ['--import', 'tsx', 'workers/media/main.ts'], {
    stdio: ['ignore', 'pipe', 'pipe'],
    env: {
      ...process.env,
      DATABASE_URL: database.url, S3_ENDPOINT: config.endpoint, S3_BUCKET: config.bucket, S3_REGION: config.region, S3_ACCESS_KEY_ID: config.accessKeyId, S3_SECRET_ACCESS_KEY: config.secretAccessKey,
      PUBLIC_URL: 'http://127.0.0.1:3000', WORKER_CONCURRENCY: String(options.concurrency ?? 2), WORKER_TEMP_DIR: options.tempDir,
    },
  })
  let log = ''
  child.stderr!.on('data', chunk => log += chunk)
  const ended = new Promise<number | null>(resolve => child.once('exit', resolve))
  await new Promise<void>((resolve, reject) => {
    createInterface({ input: child.stdout! }).on('line', line => JSON.parse(line).ready && resolve())
    void ended.then(code => reject(new Error(`The worker ended with ${code} while starting:\n${log}`)))
  })
  return {
    process: child,
    log: () => log,
    stop: async (signal = 'SIGTERM') => {
      if (child.exitCode === null && child.signalCode === null) child.kill(signal)
      return ended
    },
  }
}
