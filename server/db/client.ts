import { drizzle, type MySql2Database } from 'drizzle-orm/mysql2'
import mysql, { type Pool } from 'mysql2/promise'

/** Handle for statements outside a transaction. */
export type Db = MySql2Database
/** Handle inside a transaction; everything that reads or writes takes one of the two. */
export type Tx = Parameters<Parameters<Db['transaction']>[0]>[0]
/** Either handle, for reads. */
export type Reader = Db | Tx

export interface Database {
  db: Db
  pool: Pool
  close(): Promise<void>
}

/** Opens the pool. Instants travel as UTC; isolation and lock waits are set per connection. */
export function openDatabase(url: string, connections = 10): Database {
  const pool = mysql.createPool({
    uri: url,
    connectionLimit: connections,
    timezone: 'Z',
    charset: 'utf8mb4_unicode_520_ci',
    supportBigNumbers: true,
    decimalNumbers: true,
    multipleStatements: false,
  })
  // mysql2 hands every fresh connection out through this event before its first query.
  pool.pool.on('connection', (connection) => {
    connection.query("SET time_zone = '+00:00', innodb_lock_wait_timeout = 5")
    connection.query('SET SESSION TRANSACTION ISOLATION LEVEL READ COMMITTED')
  })
  const db = drizzle({ client: pool, casing: 'snake_case' })
  return { db, pool, close: () => pool.end() }
}
