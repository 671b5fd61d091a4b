import type { AddressInfo } from 'node:net'
import { simpleParser } from 'mailparser'
import { SMTPServer } from 'smtp-server'
import { onTestFinished } from 'vitest'

export interface ReceivedLetter { messageId: string, to: string, subject: string, text: string, html: string }

/**
 * A mail server of one test's own. `dies` cuts the connection of the next letters: before it has taken the letter, or
 * after it has, before the sender hears of it.
 */
export async function mailServer() {
  const received: ReceivedLetter[] = []
  const faults: ('before' | 'after')[] = []
  const server = new SMTPServer({
    authOptional: true, disabledCommands: ['STARTTLS', 'AUTH'], disableReverseLookup: true,
    onData(stream, session, done) {
      const fault = faults.shift()
      void simpleParser(stream).then(({ messageId, to, subject, text, html }) => {
        if (fault !== 'before') received.push({ messageId: messageId!, to: [to!].flat().map(one => one.text).join(), subject: subject!, text: text!, html: html || '' })
        if (!fault) return done()
        const { connections } = server as unknown as { connections: Set<{ _socket: { destroy: () => void } }> }
        for (const connection of connections) connection._socket.destroy()
      })
    },
  })
  server.on('error', () => {})
  await new Promise<void>(resolve => server.listen(0, '127.0.0.1', resolve))
  const { port } = server.server.address() as AddressInfo
  onTestFinished(() => new Promise<void>(resolve => server.close(() => resolve())))
  return { url: `smtp://127.0.0.1:${port}`, received, dies: (...next: ('before' | 'after')[]) => void faults.push(...next) }
}
