import pg from 'pg'
import { ComputeError } from '#shared/errors'
import type { Role } from '#shared/schemas/people'
import { hasRole } from './access'
import { hintChannel, type Hint } from './hints'

export interface HintStream {
  studioId: string
  personId: string
  role: Role
  /** asked from time to time in which role its person may still listen, if at all; throws while it can't be told */
  mayListen: () => Promise<Role | undefined>
  /** tells the listener to read everything again */
  resync: () => void
  send: (hint: Pick<Hint, 'topic' | 'id' | 'revision'>) => void
  end: () => void
}

/** A record's hints go out at most twice a second; the last one always does. */
const leastGapMs = 500
const maxStreamsPerPerson = 20
const streams = new Set<HintStream>()
const pending = new Map<string, { latest?: Hint, timer: NodeJS.Timeout }>()
let connection: pg.Client | undefined
let stopped = true
let retry: NodeJS.Timeout | undefined

/** Opens the process's one listening connection and keeps it open; after a gap every listener is told to read again. */
export async function startHints(databaseUrl: string): Promise<void> {
  stopped = false
  const client = connection = new pg.Client({ connectionString: databaseUrl })
  client.on('notification', ({ payload }) => payload && takeHint(JSON.parse(payload) as Hint))
  client.on('error', () => undefined)
  client.on('end', () => {
    if (!stopped) retry = setTimeout(() => void startHints(databaseUrl), 1000)
  })
  try {
    await client.connect()
    await client.query(`listen ${hintChannel}`)
    for (const stream of streams) stream.resync()
  }
  catch {
    await client.end().catch(() => undefined)
  }
}

export async function stopHints(): Promise<void> {
  stopped = true
  clearTimeout(retry)
  for (const { timer } of pending.values()) clearTimeout(timer)
  pending.clear()
  for (const stream of [...streams]) stream.end()
  await connection?.end()
}

/** Joins a listener; answers what to call when it has gone. Its membership and session are looked at again each `recheckSeconds`. */
export function joinHints(stream: HintStream, recheckSeconds: number): () => void {
  if ([...streams].filter(other => other.personId === stream.personId).length >= maxStreamsPerPerson) {
    throw new ComputeError('too_many_requests', `Emulside is open in more than ${maxStreamsPerPerson} places. Close some of them.`)
  }
  streams.add(stream)
  stream.resync()
  const recheck = setInterval(() => {
    // The database may be away for a moment: asked again the next time.
    stream.mayListen().then(role => role ? stream.role = role : stream.end(), () => undefined)
  }, recheckSeconds * 1000)
  return () => {
    clearInterval(recheck)
    streams.delete(stream)
  }
}

function takeHint(hint: Hint): void {
  // Not to be merged with what others may know of the same record.
  const key = `${hint.studioId} ${hint.topic} ${hint.id} ${hint.onlyFor ?? ''}`
  const waiting = pending.get(key)
  if (waiting) waiting.latest = hint
  else {
    deliver(hint)
    pending.set(key, { timer: setTimeout(() => afterGap(key), leastGapMs) })
  }
}

function afterGap(key: string): void {
  const { latest } = pending.get(key)!
  pending.delete(key)
  if (latest) takeHint(latest)
}

function deliver({ studioId, topic, id, revision, onlyFor, leastRole }: Hint): void {
  for (const stream of streams) {
    if (stream.studioId === studioId && (!onlyFor || onlyFor === stream.personId) && (!leastRole || hasRole(stream.role, leastRole))) stream.send({ topic, id, revision })
  }
}
