import type { IncomingMessage } from 'node:http'

/** A slow line may need long for a large picture; one that has gone silent is cut. */
const requestTimeoutMs = 3600_000
const silenceTimeoutMs = 60_000

/** Lets a large body take its time; answers how to go back to the usual patience. */
export function bePatientWith(request: IncomingMessage): () => void {
  const server = (request.socket as { server?: { requestTimeout: number } }).server
  if (server) server.requestTimeout = Math.max(server.requestTimeout, requestTimeoutMs)
  const silence = () => request.destroy()
  request.socket.setTimeout(silenceTimeoutMs, silence)
  return () => {
    request.socket.setTimeout(0)
    request.socket.off('timeout', silence)
  }
}
