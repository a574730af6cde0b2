import { drizzle, type MySql2Database } from 'drizzle-orm/mysql2'
import type { Lease, Pool } from './pool'

/**
 * What a repository asks with: the whole database (each statement by itself) or one transaction. Keys of tables are
 * camel case, columns snake case; the query builder translates.
 */
export type Queries = MySql2Database

/** The query builder over a pool or over one connection. */
export function queriesOver(client: Pick<Pool | Lease, 'query'>): Queries {
  return drizzle({ client: { query: client.query } as never, casing: 'snake_case' }) as unknown as Queries
}
