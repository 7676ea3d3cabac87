import { randomUUID } from 'node:crypto'
import { createServer } from 'node:http'
import { mkdirSync, readdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs'
import type { AddressInfo } from 'node:net'
import { join } from 'node:path'
import { buffer } from 'node:stream/consumers'
import { simpleParser } from 'mailparser'
import { SMTPServer } from 'smtp-server'
import { listPage, mailPage } from './pages'

const MAX_MAIL_BYTES = 5 * 1024 * 1024

export interface Mailbox { smtpUrl: string, webUrl: string, close: () => Promise<void> }

/**
 * A mail sink for one machine: takes every mail by SMTP on loopback, sends none on,
 * keeps each as an `.eml` file and shows them in the browser.
 */
export async function createMailbox(options: { dataDir: string, smtpPort: number, webPort: number }): Promise<Mailbox> {
  mkdirSync(options.dataDir, { recursive: true, mode: 0o700 })
  const smtp = new SMTPServer({
    disabledCommands: ['AUTH', 'STARTTLS'],
    size: MAX_MAIL_BYTES,
    onData: (stream, _session, done) => {
      buffer(stream).then((bytes) => {
        if (stream.sizeExceeded) return done(Object.assign(new Error('Mail is larger than 5 MB'), { responseCode: 552 }))
        // Written whole or not at all, named so that the newest sorts last.
        const name = `${new Date().toISOString().replaceAll(':', '-')}-${randomUUID().slice(0, 8)}.eml`
        writeFileSync(join(options.dataDir, `.${name}`), bytes, { mode: 0o600 })
        renameSync(join(options.dataDir, `.${name}`), join(options.dataDir, name))
        done()
      }, done)
    },
  })
  smtp.on('error', error => console.error(`smtp: ${error.message}`))
  await new Promise<void>((resolve, reject) => {
    smtp.once('error', reject)
    smtp.listen(options.smtpPort, '127.0.0.1', () => resolve())
  })

  const web = createServer((request, response) => {
    void answer(options.dataDir, request.url ?? '/').then(({ status, type, body }) => {
      response.writeHead(status, { 'content-type': type, 'content-security-policy': 'default-src \'none\'; style-src \'unsafe-inline\'', 'x-content-type-options': 'nosniff', 'cache-control': 'no-store' }).end(body)
    }).catch(() => response.writeHead(500).end())
  })
  await new Promise<void>((resolve, reject) => {
    web.once('error', reject)
    web.listen(options.webPort, '127.0.0.1', () => resolve())
  })
  return {
    smtpUrl: `smtp://127.0.0.1:${(smtp.server.address() as AddressInfo).port}`,
    webUrl: `http://127.0.0.1:${(web.address() as AddressInfo).port}`,
    close: async () => {
      await new Promise<void>(resolve => smtp.close(() => resolve()))
      web.closeAllConnections()
      await new Promise(resolve => web.close(resolve))
    },
  }
}

async function answer(dataDir: string, path: string): Promise<{ status: number, type: string, body: string }> {
  const names = readdirSync(dataDir).filter(name => /^[\w-]+(\.[\w-]+)*\.eml$/.test(name)).sort().reverse()
  const html = 'text/html; charset=utf-8'
  if (path === '/') {
    const mails = await Promise.all(names.slice(0, 200).map(async name => ({ name, mail: await simpleParser(readFileSync(join(dataDir, name))) })))
    return { status: 200, type: html, body: listPage(mails) }
  }
  // Only names that the folder lists are opened: nothing of the address reaches a path.
  const wanted = names.find(name => path === `/mail/${name}` || path === `/raw/${name}`)
  if (!wanted) return { status: 404, type: html, body: listPage([]) }
  const bytes = readFileSync(join(dataDir, wanted))
  if (path.startsWith('/raw/')) return { status: 200, type: 'text/plain; charset=utf-8', body: bytes.toString('utf8') }
  return { status: 200, type: html, body: mailPage(wanted, await simpleParser(bytes)) }
}
