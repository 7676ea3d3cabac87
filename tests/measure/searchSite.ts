import { spawn } from 'node:child_process'
import { freePort, sleep } from '../../workers/local/processes'

/** The built site against a database, with no storage behind it: enough for what reads rows only. */
export async function serveSite(databaseUrl: string): Promise<{ url: string, pid: number, stop: () => Promise<void> }> {
  const port = await freePort()
  const url = `http://127.0.0.1:${port}`
  const child = spawn(process.execPath, ['.output/server/index.mjs'], {
    stdio: ['ignore', 'ignore', 'pipe'],
    env: {
      ...process.env, DATABASE_URL: databaseUrl, PORT: String(port), HOST: '127.0.0.1', PUBLIC_URL: url, NUXT_SESSION_PASSWORD: 'measuring-only-measuring-only-measuring', RIBBAND_LIMIT_SCALE: '10000',
      S3_ENDPOINT: 'http://127.0.0.1:9', S3_ACCESS_KEY_ID: 'measuring', S3_SECRET_ACCESS_KEY: 'measuring',
    },
  })
  let log = ''
  child.stderr.on('data', chunk => log = (log + chunk).slice(-2000))
  for (let waited = 0; ; waited += 100) {
    if (child.exitCode !== null || waited > 60_000) throw new Error(`The site did not start.\n${log}`)
    if (await fetch(`${url}/api/watch`).then(answer => answer.ok, () => false)) break
    await sleep(100)
  }
  return {
    url, pid: child.pid!,
    stop: () => new Promise((resolve) => {
      if (child.exitCode !== null) return resolve()
      child.once('exit', () => resolve())
      child.kill('SIGTERM')
    }),
  }
}
