import type { ParsedMail } from 'mailparser'

const escape = (text: string) => text.replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('>', '&gt;').replaceAll('"', '&quot;')

const STYLE = 'body{font:16px/1.5 system-ui,sans-serif;max-width:48rem;margin:2rem auto;padding:0 1rem;background:#f5f1e8;color:#22272a}a{color:inherit}table{width:100%;border-collapse:collapse}td,th{text-align:left;padding:.5rem;border-bottom:1px solid #d4cdbe}pre{white-space:pre-wrap;background:#fcfaf5;padding:1rem;border:1px solid #d4cdbe}@media(prefers-color-scheme:dark){body{background:#1c1f20;color:#ece7db}pre{background:#232728;border-color:#3e4343}td,th{border-color:#3e4343}}'

function page(title: string, body: string): string {
  return `<!doctype html><html lang="en"><meta charset="utf-8"><meta name="viewport" content="width=device-width"><title>${escape(title)}</title><style>${STYLE}</style><body>${body}</body></html>`
}

const recipients = (mail: ParsedMail) => [mail.to ?? []].flat().map(one => one.text).join(', ')

export function listPage(mails: { name: string, mail: ParsedMail }[]): string {
  const rows = mails.map(({ name, mail }) => `<tr><td><a href="/mail/${escape(name)}">${escape(mail.subject ?? '(no subject)')}</a></td><td>${escape(recipients(mail))}</td><td>${escape(mail.date?.toISOString().slice(0, 16).replace('T', ' ') ?? '')}</td></tr>`).join('')
  return page('Mail', `<h1>Mail</h1>${rows ? `<table><tr><th>Subject</th><th>To</th><th>Sent</th></tr>${rows}</table>` : '<p>No mail yet. Whatever the site sends appears here; nothing leaves this machine.</p>'}`)
}

/** The text part, with its links made clickable; the HTML part is never shown as HTML. */
export function mailPage(name: string, mail: ParsedMail): string {
  const text = escape(mail.text ?? '').replace(/https?:\/\/[^\s<>"]+/g, link => `<a href="${link}">${link}</a>`)
  return page(mail.subject ?? 'Mail', `<p><a href="/">All mail</a> · <a href="/raw/${escape(name)}">as it came</a></p><h1>${escape(mail.subject ?? '(no subject)')}</h1><p>From ${escape(mail.from?.text ?? '')}<br>To ${escape(recipients(mail))}</p><pre>${text}</pre>`)
}
