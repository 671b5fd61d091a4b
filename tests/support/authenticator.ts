import { createHash, generateKeyPairSync, randomBytes, sign, type KeyObject } from 'node:crypto'
import type { Agent } from './studio'

/**
 * An authenticator in software, after WebAuthn Level 2 (6.1 authenticator data, 6.5.4 attestation object, 8.7 attestation "none"),
 * RFC 9052 (COSE keys) and RFC 8949 (CBOR); it shares no code with the library that checks it.
 */
export class Authenticator {
  readonly credentialId = randomBytes(32)
  counter = 0
  userHandle: string | undefined
  private readonly keys = generateKeyPairSync('ec', { namedCurve: 'P-256' })
  constructor(readonly origin: string, readonly rpId = new URL(origin).hostname) {}

  get id() {
    return this.credentialId.toString('base64url')
  }

  /** Answers `navigator.credentials.create`. */
  create({ challenge, user }: { challenge: string, user?: { id: string } }) {
    this.userHandle = user?.id
    const length = Buffer.alloc(2)
    length.writeUInt16BE(this.credentialId.length)
    const authData = Buffer.concat([this.head(flags.present | flags.verified | flags.hasKey), Buffer.alloc(16), length, this.credentialId, coseKey(this.keys.publicKey)])
    const attestationObject = cbor(new Map<string, unknown>([['fmt', 'none'], ['attStmt', new Map()], ['authData', authData]]))
    return this.credential({ clientDataJSON: this.clientData('webauthn.create', challenge).toString('base64url'), attestationObject: attestationObject.toString('base64url'), transports: ['internal'] })
  }

  /** Answers `navigator.credentials.get`; counts by one unless told otherwise. */
  get({ challenge }: { challenge: string }, { counter = this.counter + 1, verified = true } = {}) {
    this.counter = counter
    const authData = this.head(flags.present | (verified ? flags.verified : 0))
    const clientData = this.clientData('webauthn.get', challenge)
    const signature = sign('sha256', Buffer.concat([authData, createHash('sha256').update(clientData).digest()]), this.keys.privateKey)
    return this.credential({ clientDataJSON: clientData.toString('base64url'), authenticatorData: authData.toString('base64url'), signature: signature.toString('base64url'), userHandle: this.userHandle })
  }

  private clientData(type: string, challenge: string) {
    return Buffer.from(JSON.stringify({ type, challenge, origin: this.origin, crossOrigin: false }))
  }

  private head(flagBits: number) {
    const rest = Buffer.alloc(5)
    rest.writeUInt8(flagBits)
    rest.writeUInt32BE(this.counter, 1)
    return Buffer.concat([createHash('sha256').update(this.rpId).digest(), rest])
  }

  private credential<Response>(response: Response) {
    return { id: this.id, rawId: this.id, type: 'public-key', clientExtensionResults: {}, response }
  }
}

/** WebAuthn Level 2, 6.1 */
const flags = { present: 0x01, verified: 0x04, hasKey: 0x40 }

/** ES256 on P-256 (RFC 9053, 2.1 and 7.1.1) */
function coseKey(key: KeyObject): Buffer {
  const { x, y } = key.export({ format: 'jwk' })
  return cbor(new Map<number, unknown>([[1, 2], [3, -7], [-1, 1], [-2, Buffer.from(x!, 'base64url')], [-3, Buffer.from(y!, 'base64url')]]))
}

function cbor(value: unknown): Buffer {
  if (typeof value === 'number') return value < 0 ? cborHead(1, -1 - value) : cborHead(0, value)
  if (typeof value === 'string') return Buffer.concat([cborHead(3, Buffer.byteLength(value)), Buffer.from(value)])
  if (Buffer.isBuffer(value)) return Buffer.concat([cborHead(2, value.length), value])
  if (value instanceof Map) return Buffer.concat([cborHead(5, value.size), ...[...value].flat().map(cbor)])
  throw new Error('Not needed here')
}

function cborHead(major: number, count: number): Buffer {
  if (count < 24) return Buffer.from([major << 5 | count])
  return count < 256 ? Buffer.from([major << 5 | 24, count]) : Buffer.from([major << 5 | 25, count >> 8, count & 255])
}

/** Where the application of this vitest worker takes passkeys. */
export async function passkeyOrigin(agent: Agent): Promise<string> {
  return (await agent.get('/api/auth/ways')).body.passkeys.origin
}

/** Adds a passkey to the account that `agent` is signed in to. */
export async function newPasskey(agent: Agent) {
  const authenticator = new Authenticator(await passkeyOrigin(agent))
  const credential = authenticator.create((await agent.post('/api/me/passkeys/options')).body)
  const answer = await agent.post('/api/me/passkeys', { name: 'Phone by the sink', credential })
  if (answer.status !== 201) throw new Error(`Adding a passkey answered ${answer.status}: ${answer.text}`)
  return { authenticator, id: answer.body.id as string }
}
