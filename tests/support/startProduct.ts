import { type ChildProcess, fork } from 'node:child_process'
import { chmodSync, mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'

export interface Product { url: string, dataDir: string, process: ChildProcess, stop: () => Promise<void> }

const entry = fileURLToPath(new URL('../../workers/start.mjs', import.meta.url))

/** Starts the whole product as `npm start` does, with a data folder of its own; `dataDir` continues an earlier one. */
export async function startProduct(options: { dataDir?: string, env?: Record<string, string> } = {}): Promise<Product> {
  const dataDir = options.dataDir ?? mkdtempSync(join(tmpdir(), 'ribband-product-'))
  chmodSync(dataDir, 0o755)
  const child = fork(entry, [], {
    env: { ...process.env, RIBBAND_DATA: dataDir, RIBBAND_LIMIT_SCALE: '1000', ...options.env },
    stdio: ['ignore', 'pipe', 'pipe', 'ipc'],
  })
  let output = ''
  child.stdout!.on('data', chunk => output += chunk)
  child.stderr!.on('data', chunk => output += chunk)
  const url = await new Promise<string>((resolve, reject) => {
    child.once('message', (message: { url: string }) => resolve(message.url))
    child.once('exit', code => reject(new Error(`The product ended with ${code} while starting:\n${output}`)))
  })
  return {
    url, dataDir, process: child,
    stop: async () => {
      if (child.exitCode !== null) return
      const ended = new Promise(resolve => child.once('exit', resolve))
      child.kill('SIGINT')
      await ended
    },
  }
}

/** Playwright's global set-up: one product for all browser tests. */
export default async function globalSetup() {
  if (process.env.RIBBAND_TEST_URL) return
  const product = await startProduct()
  process.env.RIBBAND_TEST_URL = product.url
  process.env.RIBBAND_TEST_DATA = product.dataDir
  return async () => {
    await product.stop()
    rmSync(product.dataDir, { recursive: true, force: true })
  }
}
