import { createTransport, type Transporter } from 'nodemailer'
import { readSettings } from '../config'

export interface OutgoingLetter { to: string, subject: string, text: string, html: string, messageId: string }

let opened: Transporter | undefined

/** False where no mail server is configured: letters then wait in the outbox. */
export const mailIsConfigured = (): boolean => readSettings().SMTP_URL !== undefined

/** Hands a letter to the mail server; done when the server has taken it. Throws what the server or the connection said. */
export async function handOver({ to, subject, text, html, messageId }: OutgoingLetter): Promise<void> {
  opened ??= openTransport(readSettings().SMTP_URL!)
  await opened.sendMail({ from: readSettings().MAIL_FROM, to, subject, text, html, messageId, disableFileAccess: true, disableUrlAccess: true })
}

function openTransport(address: string): Transporter {
  const { protocol, hostname, port, username, password } = new URL(address)
  const secure = protocol === 'smtps:'
  return createTransport({
    host: hostname.replace(/[[\]]/g, ''), port: Number(port) || (secure ? 465 : 587), secure,
    auth: username ? { user: decodeURIComponent(username), pass: decodeURIComponent(password) } : undefined,
    connectionTimeout: 10_000, greetingTimeout: 10_000, socketTimeout: 20_000,
  })
}

/** A refusal that will not change by trying again (RFC 5321, 4.2.1: 5yz), of the address or the content; not of our sign-in. */
export function isForGood(error: unknown): boolean {
  const { responseCode, code } = error as { responseCode?: number, code?: string }
  return responseCode !== undefined && responseCode >= 500 && code !== 'EAUTH'
}
