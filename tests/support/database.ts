import pg from 'pg'
import { application } from './studio'

type Sql = (text: string, values?: unknown[]) => Promise<Record<string, unknown>[]>

/** Straight to the application's database: for what no route can bring about. */
export async function withDatabase<T>(use: (sql: Sql) => Promise<T>): Promise<T> {
  const client = new pg.Client({ connectionString: application().databaseUrl })
  await client.connect()
  try {
    return await use(async (text, values) => (await client.query(text, values)).rows)
  }
  finally {
    await client.end()
  }
}

/** One statement on the application's database. */
export const sql: Sql = (text, values) => withDatabase(run => run(text, values))
