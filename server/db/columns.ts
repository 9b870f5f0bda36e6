import { bigint, datetime, json } from 'drizzle-orm/mysql-core'

/** Server-made id; a number here, a JSON string on the wire. */
export const id = () => bigint({ mode: 'number', unsigned: true }).autoincrement().primaryKey()

/** Reference to another table's id. */
export const ref = () => bigint({ mode: 'number', unsigned: true })

/** Instant in UTC to the millisecond; `timestamp` drifts with the session zone, so it is never used. */
export const instant = () => datetime({ fsp: 3, mode: 'date' })

/** JSON column of a known shape (MariaDB keeps it as longtext with a validity check). */
export const jsonOf = <T>() => json().$type<T>()
