import { randomBytes } from 'node:crypto'
import { fileURLToPath } from 'node:url'
import mysql from 'mysql2/promise'
import { openDatabase, type Database } from '#server/db/client.ts'
import { migrateDatabase } from '#server/db/migrate.ts'

export interface TestDatabase extends Database {
  /** As the running server: only the rights it was granted. */
  url: string
  ownerUrl: string
  drop(): Promise<void>
}

const migrations = fileURLToPath(new URL('../../drizzle', import.meta.url))

/** A database of its own for one suite, migrated, opened with the rights of the running server. */
export async function createTestDatabase(): Promise<TestDatabase> {
  const admin = process.env.TEST_DATABASE_URL
  if (!admin) throw new Error('no test database: run npm test')
  const name = `t_${randomBytes(6).toString('hex')}`
  const password = randomBytes(12).toString('hex')
  const connection = await mysql.createConnection({ uri: admin })
  await connection.query(`CREATE DATABASE ${name} CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_520_ci`)
  await connection.query(`CREATE USER '${name}'@'127.0.0.1' IDENTIFIED BY '${password}'`)
  const ownerUrl = admin.replace(/\/[^/]*$/, `/${name}`)
  const url = ownerUrl.replace(/\/\/[^@]*@/, `//${name}:${password}@`)
  await migrateDatabase({ adminUrl: ownerUrl, appUrl: url, folder: migrations })
  const database = openDatabase(url, 8)
  return {
    ...database,
    url,
    ownerUrl,
    async drop() {
      await database.close()
      await connection.query(`DROP DATABASE ${name}`)
      await connection.query(`DROP USER '${name}'@'127.0.0.1'`)
      await connection.end()
    },
  }
}
