import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { createTransport } from 'nodemailer'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { createMailbox, type Mailbox } from '../../../../workers/local/mailbox/mailbox'

const folder = mkdtempSync(join(tmpdir(), 'ribband-mail-'))
let mailbox: Mailbox

beforeAll(async () => mailbox = await createMailbox({ dataDir: folder, smtpPort: 0, webPort: 0 }))
afterAll(async () => {
  await mailbox.close()
  rmSync(folder, { recursive: true })
})

it('shows what was sent as text, with script in it harmless and links to follow', async () => {
  const transport = createTransport(mailbox.smtpUrl)
  await transport.sendMail({ from: 'shop@example.org', to: 'crew@example.org', subject: 'Glue <up> on Saturday', text: 'See http://localhost:3000/builds/1 <script>alert(1)</script>' })
  transport.close()
  const list = await (await fetch(mailbox.webUrl)).text()
  expect(list).toContain('Glue &lt;up&gt; on Saturday')
  const link = list.match(/href="(\/mail\/[^"]+)"/)![1]!
  const mail = await (await fetch(mailbox.webUrl + link)).text()
  expect(mail).toContain('<a href="http://localhost:3000/builds/1">')
  expect(mail).not.toContain('<script>')
})

it('opens only mails that it lists', async () => {
  for (const path of ['/raw/../../etc/passwd', '/raw/%2e%2e%2fsecrets', '/mail/none.eml']) {
    expect((await fetch(mailbox.webUrl + path)).status).toBe(404)
  }
})
