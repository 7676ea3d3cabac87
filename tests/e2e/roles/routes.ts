import { readdirSync } from 'node:fs'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'

const server = fileURLToPath(new URL('../../../server', import.meta.url))

/** Every route the site answers, as `GET /api/builds/[build]`, read from the files: a new one cannot be forgotten. */
export function everyRoute(): string[] {
  return ['api', 'routes'].flatMap((folder) => {
    const files = readdirSync(join(server, folder), { recursive: true, encoding: 'utf8' }).filter(name => name.endsWith('.ts'))
    return files.map((file) => {
      const method = /\.(get|post|put|patch|delete)\.ts$/.exec(file)?.[1]?.toUpperCase() ?? 'ANY'
      const path = file.replace(/(\.(get|post|put|patch|delete))?\.ts$/, '').replace(/(^|\/)index$/, '')
      return `${method} ${folder === 'api' ? '/api/' : '/'}${path}`.replace(/\/$/, '')
    })
  }).sort()
}
