import { createMailbox } from './mailbox'

const number = (name: string) => {
  const value = Number(process.env[name])
  if (!Number.isInteger(value) || value < 0 || value > 65535) {
    console.error(`${name} must be a port number`)
    process.exit(1)
  }
  return value
}

const mailbox = await createMailbox({ dataDir: process.env.MAILBOX_DATA_DIR ?? '.data/mail', smtpPort: number('MAILBOX_SMTP_PORT'), webPort: number('MAILBOX_WEB_PORT') })
console.log(JSON.stringify({ ready: true, smtp: mailbox.smtpUrl, web: mailbox.webUrl }))
for (const signal of ['SIGINT', 'SIGTERM'] as const) process.on(signal, () => void mailbox.close().then(() => process.exit(0)))
