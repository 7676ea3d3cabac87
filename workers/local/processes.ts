import { readFileSync } from 'node:fs'
import { createServer } from 'node:net'

/** A free loopback port. Tries `preferred` first so that an address stays the same between starts. */
export function freePort(preferred = 0): Promise<number> {
  return new Promise((resolve, reject) => {
    const server = createServer()
    server.once('error', () => preferred ? resolve(freePort()) : reject(new Error('No free port on 127.0.0.1.')))
    server.listen(preferred, '127.0.0.1', () => {
      const { port } = server.address() as { port: number }
      server.close(() => resolve(port))
    })
  })
}

/** The command line of a running process, or null when it is gone (or this is not Linux). */
export function commandLine(pid: number): string | null {
  try {
    return readFileSync(`/proc/${pid}/cmdline`, 'utf8').replaceAll('\0', ' ').trim() || null
  }
  catch {
    return null
  }
}

export function sleep(ms: number): Promise<void> {
  return new Promise(resolve => setTimeout(resolve, ms))
}
