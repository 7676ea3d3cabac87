import { rmSync } from 'node:fs'
import { join } from 'node:path'
import { EnvironmentError, readEnvironment } from '#server/config/environment'
import { migrateDatabase } from '#server/database/migrate'
import { startDatabase } from '../local/database'
import { freePort, sleep } from '../local/processes'
import { buildSite, refuse, root, say } from '../prepare.mjs'
import { createChildren } from './children'
import { readSecrets, writeSecrets } from './secrets'

export interface StartOptions {
  /** The site by `nuxt dev` with reload instead of a build. */
  dev?: boolean
}

/**
 * Starts whatever the environment does not name, applies migrations, makes the demo build once,
 * and runs site and worker until Ctrl-C. Everything it writes is under RIBBAND_DATA (`.data`).
 */
export async function start({ dev = false }: StartOptions = {}): Promise<void> {
  const began = Date.now()
  const dataDir = process.env.RIBBAND_DATA ?? join(root, '.data')
  const secretsPath = join(dataDir, 'secrets.json')
  const secrets = readSecrets(secretsPath)
  const children = createChildren(dataDir, say)
  const stop = async (code: number) => {
    if (children.stopping) return
    say('stopping …')
    await children.stop()
    process.exit(code)
  }
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) process.on(signal, () => void stop(0))

  try {
    const port = async (name: string, wanted: number) => {
      secrets.ports[name] = await freePort(secrets.ports[name] ?? wanted)
      writeSecrets(secretsPath, secrets)
      return secrets.ports[name]
    }
    const env: Record<string, string | undefined> = { ...process.env }

    if (!env.DATABASE_URL) {
      const open = async (): Promise<void> => {
        const local = await startDatabase({
          dataDir: join(dataDir, 'postgres'),
          port: secrets.ports.database ?? 5544,
          onExit: () => {
            if (children.stopping) return
            say('the database ended; starting it again.')
            setTimeout(() => void open().catch(error => say(String(error))), 500)
          },
        })
        stopDatabase = local.stop
        env.DATABASE_URL = local.url
        secrets.ports.database = local.port
        writeSecrets(secretsPath, secrets)
      }
      let stopDatabase = async () => {}
      await open()
      children.add('database', () => stopDatabase())
    }
    const sitePort = Number(env.PORT ?? 0) || await port('site', 3000)
    env.PORT = String(sitePort)
    env.PUBLIC_URL ??= `http://localhost:${sitePort}`
    if (!env.S3_ENDPOINT) {
      const storagePort = await port('storage', 9440)
      Object.assign(env, { S3_ENDPOINT: `http://127.0.0.1:${storagePort}`, S3_ACCESS_KEY_ID: secrets.storageKeyId, S3_SECRET_ACCESS_KEY: secrets.storageSecret, S3_REGION: env.S3_REGION ?? 'us-east-1' })
      await children.start({
        name: 'storage',
        command: process.execPath,
        args: ['--import', 'tsx', join(root, 'workers/local/storage/main.ts')],
        env: { STORAGE_DATA_DIR: join(dataDir, 'storage'), STORAGE_PORT: String(storagePort), S3_ACCESS_KEY_ID: secrets.storageKeyId, S3_SECRET_ACCESS_KEY: secrets.storageSecret, S3_REGION: env.S3_REGION! },
        ready: () => answers(`http://127.0.0.1:${storagePort}/`),
      })
    }
    let mailbox = ''
    if (!env.SMTP_URL) {
      const [smtp, web] = [await port('smtp', 2525), await port('mailbox', 8025)]
      env.SMTP_URL = `smtp://127.0.0.1:${smtp}`
      mailbox = `http://localhost:${web}`
      await children.start({
        name: 'mailbox',
        command: process.execPath,
        args: ['--import', 'tsx', join(root, 'workers/local/mailbox/main.ts')],
        env: { MAILBOX_DATA_DIR: join(dataDir, 'mail'), MAILBOX_SMTP_PORT: String(smtp), MAILBOX_WEB_PORT: String(web) },
        ready: () => answers(`http://127.0.0.1:${web}/`),
      })
    }
    env.NUXT_SESSION_PASSWORD ??= secrets.sessionPassword
    const settings = readEnvironment(env)
    const shared = { ...env, ...Object.fromEntries(Object.entries(settings).map(([name, value]) => [name, String(value)])) } as Record<string, string>

    await migrateDatabase(settings.DATABASE_URL, join(root, 'drizzle'))
    const { prepareStorage } = await import('./storage')
    await prepareStorage(settings)

    await children.start({
      name: 'worker',
      command: process.execPath,
      args: ['--import', 'tsx', join(root, 'workers/media/main.ts')],
      env: { WORKER_TEMP_DIR: join(dataDir, 'tmp'), ...shared },
      ready: async () => true,
    })
    if (!dev) buildSite()
    await children.start({
      name: 'site',
      command: process.execPath,
      args: dev ? [join(root, 'node_modules/nuxt/bin/nuxt.mjs'), 'dev', '--port', String(sitePort)] : ['--enable-source-maps', join(root, '.output/server/index.mjs')],
      env: { ...shared, HOST: env.HOST ?? '0.0.0.0', NODE_ENV: dev ? 'development' : 'production' },
      ready: () => answers(`http://127.0.0.1:${sitePort}/health`),
    })

    const wantsDemo = env.RIBBAND_DEMO ? env.RIBBAND_DEMO === 'yes' : !process.env.DATABASE_URL
    const demo = wantsDemo ? await (await import('../demo/seed')).seedDemo(settings, say) : null

    say('')
    say(`ready after ${((Date.now() - began) / 1000).toFixed(1)} s at  ${settings.PUBLIC_URL}`)
    for (const account of demo?.accounts ?? []) say(`  ${account.role.padEnd(8)}  ${account.email}  ${account.password}`)
    if (mailbox) say(`mail that the site sends can be read at  ${mailbox}`)
    say('Ctrl-C stops everything.')
    process.send?.({ ready: true, url: settings.PUBLIC_URL })
  }
  catch (error) {
    await children.stop()
    rmSync(join(dataDir, 'run'), { recursive: true, force: true })
    refuse(error instanceof EnvironmentError ? error.message : error instanceof Error ? error.message : String(error))
  }
}

/** True when something answers there, whatever it says. */
async function answers(url: string): Promise<boolean> {
  try {
    await fetch(url, { signal: AbortSignal.timeout(2000) })
    return true
  }
  catch {
    await sleep(50)
    return false
  }
}
