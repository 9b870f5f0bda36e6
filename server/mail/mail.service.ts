import type { Clock } from '../clock.ts'
import type { Db, Reader, Tx } from '../db/client.ts'
import { insertMail, leaseDue, listStuck, updateMail } from './mail.repository.ts'
import type { Transport } from './transport.ts'

export interface Mail {
  /** One message per key, for ever; becomes the Message-ID. */
  dedupeKey: string
  to: string
  replyTo?: string
  subject: string
  body: string
}

/** Queues a message in the transaction that causes it. */
export async function queueMail(tx: Tx, now: Date, mail: Mail): Promise<void> {
  await insertMail(tx, {
    dedupeKey: mail.dedupeKey,
    recipient: mail.to,
    replyTo: mail.replyTo ?? null,
    subject: mail.subject,
    body: mail.body,
    state: 'due',
    attempts: 0,
    nextAt: now,
    createdAt: now,
  })
}

const leaseMs = 60_000
const maxWaitMs = 60 * 60_000

/** Sends what is due; what fails is tried again later, further apart each time. @returns messages sent */
export async function sendDue(db: Db, clock: Clock, transport: Transport, owner: string): Promise<number> {
  let sent = 0
  for (const row of await leaseDue(db, owner, clock.now(), leaseMs, 10)) {
    try {
      await transport.send({
        messageId: row.dedupeKey,
        to: row.recipient,
        replyTo: row.replyTo ?? undefined,
        subject: row.subject,
        body: row.body,
        date: clock.now(),
      })
      await updateMail(db, row.id, { state: 'sent', sentAt: clock.now(), leaseUntil: null, attempts: row.attempts + 1 })
      sent += 1
    } catch (error) {
      const wait = Math.min(maxWaitMs, 30_000 * 2 ** row.attempts)
      await updateMail(db, row.id, {
        attempts: row.attempts + 1,
        nextAt: new Date(clock.now().getTime() + wait),
        leaseUntil: null,
        lastError: String(error instanceof Error ? error.message : error).slice(0, 300),
      })
    }
  }
  return sent
}

/** What an administrator should hear about. */
export const stuckMail = (db: Reader) => listStuck(db, 3)
