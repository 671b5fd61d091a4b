import type { Application } from './application'

declare module 'vitest' {
  export interface ProvidedContext {
    /** one running application a vitest worker, by pool number */
    applications: Application[]
    /** a scratch database, as the role that owns every test database */
    databaseUrl: string
    /** the same as superuser, for tests that make databases of their own */
    superuserUrl: string
    /** a provider that every application signs in with */
    openIdIssuer: string
  }
}
