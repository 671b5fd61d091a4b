/** The part of the library that tests use; it comes without types. */
declare module 'oidc-provider' {
  import type { IncomingMessage, RequestListener, ServerResponse } from 'node:http'

  interface Interaction { prompt: { name: string }, params: Record<string, string | undefined>, session?: { accountId: string } }
  export default class Provider {
    constructor(issuer: string, settings: Record<string, unknown>)
    callback(): RequestListener
    interactionDetails(request: IncomingMessage, response: ServerResponse): Promise<Interaction>
    interactionFinished(request: IncomingMessage, response: ServerResponse, result: object, options?: { mergeWithLastSubmission: boolean }): Promise<void>
    Client: { prototype: { redirectUriAllowed: (address: string) => boolean } }
    Grant: new (owner: { accountId: string, clientId: string }) => { addOIDCScope: (scope: string) => void, save: () => Promise<string> }
    on(event: string, listener: (...args: unknown[]) => void): void
  }
}
