import { drizzle } from 'drizzle-orm/mysql2'
import { migrate } from 'drizzle-orm/mysql2/migrator'
import mysql from 'mysql2/promise'
import { grants } from './grants.ts'

const rights = { append: 'SELECT, INSERT', all: 'SELECT, INSERT, UPDATE, DELETE' } as const

interface Where {
  adminUrl: string
  appUrl: string
  folder: string
}

/**
 * Brings the tables up to date as owner, under a lock so that several servers may start at once,
 * and ends by granting the app's user table by table.
 * @returns whether the app's user is another than the owner, i.e. whether rights protect the ledger
 */
export async function migrateDatabase({ adminUrl, appUrl, folder }: Where): Promise<{ protectedByRights: boolean }> {
  const connection = await mysql.createConnection({ uri: adminUrl, timezone: 'Z', charset: 'utf8mb4_unicode_520_ci' })
  try {
    await connection.query("SELECT GET_LOCK('brimline-migrate', 120)")
    await migrate(drizzle({ client: connection, casing: 'snake_case' }), { migrationsFolder: folder })
    const appUser = decodeURIComponent(new URL(appUrl).username)
    const adminUser = decodeURIComponent(new URL(adminUrl).username)
    if (appUser === adminUser) return { protectedByRights: false }
    const account = `${connection.escape(appUser)}@${connection.escape(await accountHost(connection, appUser))}`
    const [tables] = await connection.query<mysql.RowDataPacket[]>(
      'SELECT table_name AS name FROM information_schema.tables WHERE table_schema = DATABASE()',
    )
    const present = new Set(tables.map((row) => String(row.name)))
    for (const [table, kind] of Object.entries(grants)) {
      if (present.has(table))
        await connection.query(`GRANT ${rights[kind]} ON ${connection.escapeId(table)} TO ${account}`)
    }
    return { protectedByRights: true }
  } finally {
    await connection.query("SELECT RELEASE_LOCK('brimline-migrate')").catch(() => undefined)
    await connection.end()
  }
}

/** The host part of the app's account, which GRANT has to name exactly. */
async function accountHost(connection: mysql.Connection, user: string): Promise<string> {
  const [rows] = await connection.query<mysql.RowDataPacket[]>('SELECT Host AS host FROM mysql.user WHERE User = ?', [
    user,
  ])
  return String(rows[0]?.host ?? '%')
}

/** Settings on which the promise "a confirmed count is never lost" rests; each returned line says what to change. */
export async function unsafeSettings(url: string): Promise<string[]> {
  const connection = await mysql.createConnection({ uri: url })
  try {
    const [rows] = await connection.query<mysql.RowDataPacket[]>(
      'SELECT @@innodb_flush_log_at_trx_commit AS flush_log, @@log_bin AS log_bin, @@sync_binlog AS sync_binlog, @@sql_mode AS sql_mode',
    )
    const row = rows[0]!
    const unsafe: string[] = []
    if (Number(row.flush_log) !== 1) unsafe.push('innodb_flush_log_at_trx_commit has to be 1')
    if (Number(row.log_bin) === 1 && Number(row.sync_binlog) !== 1)
      unsafe.push('sync_binlog has to be 1 while the binary log is on')
    if (!/STRICT_(TRANS|ALL)_TABLES/.test(String(row.sql_mode))) unsafe.push('sql_mode has to be strict')
    return unsafe
  } finally {
    await connection.end()
  }
}
