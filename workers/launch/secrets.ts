import { randomBytes } from 'node:crypto'
import { chmodSync, existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs'
import { dirname } from 'node:path'

export interface Secrets {
  sessionPassword: string
  storageKeyId: string
  storageSecret: string
  /** Ports taken at the first start, asked for again at the next, so that links and open pages go on working. */
  ports: Record<string, number>
}

/** Made at the first start and kept: only this user may read them. */
export function readSecrets(path: string): Secrets {
  const fresh: Secrets = {
    // Letters first: a value such as 4848e0 would reach the site as a number.
    sessionPassword: `s${randomBytes(36).toString('base64url')}`,
    storageKeyId: `RB${randomBytes(9).toString('hex').toUpperCase()}`,
    storageSecret: `k${randomBytes(30).toString('base64url')}`,
    ports: {},
  }
  const kept = existsSync(path) ? JSON.parse(readFileSync(path, 'utf8')) as Partial<Secrets> : {}
  const secrets = { ...fresh, ...kept }
  writeSecrets(path, secrets)
  return secrets
}

export function writeSecrets(path: string, secrets: Secrets): void {
  mkdirSync(dirname(path), { recursive: true })
  writeFileSync(path, `${JSON.stringify(secrets, null, 2)}\n`, { mode: 0o600 })
  chmodSync(path, 0o600)
}
