import { mkdirSync, readdirSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { createServer, type ServerResponse } from 'node:http'
import { join } from 'node:path'
import { simpleParser } from 'mailparser'
import { SMTPServer } from 'smtp-server'

// A mail server for an installation that has none: it takes letters on loopback and shows them on a page of its own.
// Its page is no part of the service, so that nobody signed in there reads other people's letters by it.

const { MAILBOX_DIR, MAILBOX_SMTP_PORT, MAILBOX_PAGE_PORT } = process.env as Record<string, string>
const kept = 200
mkdirSync(MAILBOX_DIR!, { recursive: true, mode: 0o700 })

const smtp = new SMTPServer({
  authOptional: true, disabledCommands: ['STARTTLS', 'AUTH'], size: 5_000_000, disableReverseLookup: true,
  onData(stream, _session, done) {
    const parts: Buffer[] = []
    stream.on('data', (part: Buffer) => parts.push(part))
    stream.on('end', () => {
      try {
        keep(Buffer.concat(parts))
        done()
      }
      catch (error) {
        done(error as Error)
      }
    })
  },
})

/** Written whole under another name first; the oldest go. */
function keep(letter: Buffer): void {
  const name = `${Date.now()}-${crypto.randomUUID()}.eml`
  writeFileSync(join(MAILBOX_DIR!, `${name}.part`), letter, { mode: 0o600 })
  renameSync(join(MAILBOX_DIR!, `${name}.part`), join(MAILBOX_DIR!, name))
  for (const old of names().slice(kept)) rmSync(join(MAILBOX_DIR!, old), { force: true })
}

/** Newest first. */
const names = (): string[] => readdirSync(MAILBOX_DIR!).filter(name => name.endsWith('.eml')).sort().reverse()

const entities: Record<string, string> = { '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;' }
const escaped = (text: string): string => text.replace(/[&<>"]/g, character => entities[character]!)
const withLinks = (text: string): string => escaped(text).replace(/https?:\/\/[^\s<]+/g, address => `<a href="${address}">${address}</a>`)

async function page(): Promise<string> {
  const letters = await Promise.all(names().slice(0, 50).map(async name => simpleParser(readFileSync(join(MAILBOX_DIR!, name)))))
  const shown = letters.map(({ subject, to, date, text }) => `<article><h2>${escaped(subject ?? '')}</h2>
    <p class="quiet">To ${escaped([to ?? []].flat().map(one => one.text).join(', '))}, ${escaped(date?.toLocaleString('en') ?? '')}</p><pre>${withLinks(text ?? '')}</pre></article>`)
  return `<!doctype html><html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width"><title>Local mailbox</title><style>
    body { font: 16px/1.5 sans-serif; background: #F6F1E6; color: #1F2328; max-width: 720px; margin: 0 auto; padding: 24px }
    article { border-top: 1px solid #1F2328; padding: 8px 0 16px } h2 { font-size: 19px; margin: 8px 0 0 } a { color: #17365D }
    .quiet { color: #555; margin: 0 } pre { white-space: pre-wrap; overflow-wrap: anywhere; font: inherit }</style></head>
    <body><h1>Local mailbox</h1><p class="quiet">Letters of this installation, which has no mail server. Set SMTP_URL to send them for real. Reload to see new ones.</p>
    ${shown.join('') || '<p>No letters yet.</p>'}</body></html>`
}

function answer(response: ServerResponse, status: number, type: string, body: string): void {
  response.writeHead(status, { 'content-type': `${type}; charset=utf-8`, 'cache-control': 'no-store', 'content-security-policy': 'default-src \'none\'; style-src \'unsafe-inline\'', 'referrer-policy': 'no-referrer' })
  response.end(body)
}

const web = createServer((request, response) => {
  // A page elsewhere that resolves a name of its own to this machine must not read it.
  const host = (request.headers.host ?? '').replace(/:\d+$/, '')
  if (!['127.0.0.1', 'localhost'].includes(host) || request.method !== 'GET' || request.url !== '/') return answer(response, 404, 'text/plain', 'Nothing here.')
  page().then(html => answer(response, 200, 'text/html', html), () => answer(response, 500, 'text/plain', 'The letters could not be read.'))
})

smtp.on('error', error => process.stderr.write(`${error.message}\n`))
smtp.listen(Number(MAILBOX_SMTP_PORT), '127.0.0.1')
web.listen(Number(MAILBOX_PAGE_PORT), '127.0.0.1')
for (const signal of ['SIGTERM', 'SIGINT'] as const) process.on(signal, () => process.exit(0))
