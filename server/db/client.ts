import { drizzle, type NodePgDatabase } from 'drizzle-orm/node-postgres'
import pg from 'pg'
import * as schema from './schema'

export type Database = NodePgDatabase<typeof schema>
export type Transaction = Parameters<Parameters<Database['transaction']>[0]>[0]
/** What a query needs: the database or a transaction in it. */
export type Queryable = Database | Transaction

let pool: pg.Pool | undefined
let database: Database | undefined

/** Opens the process's one pool; later calls give the same database. */
export function openDatabase(url: string, maxConnections = 10): Database {
  pool ??= new pg.Pool({ connectionString: url, max: maxConnections })
  database ??= drizzle(pool, { schema, casing: 'snake_case' })
  return database
}

export function db(): Database {
  if (!database) throw new Error('The database is not open yet: call openDatabase first.')
  return database
}

export async function closeDatabase(): Promise<void> {
  const open = pool
  pool = database = undefined
  await open?.end()
}
