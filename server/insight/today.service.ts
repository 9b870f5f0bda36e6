import type { Today } from '#shared/contracts/replenishment.ts'
import { workingDaysBetween } from '#shared/replenishment/believed.ts'
import { emptyCalendars } from '../catalogue/calendars.service.ts'
import { readHospital } from '../catalogue/hospital.service.ts'
import type { Clock } from '../clock.ts'
import { momentOf, viewBins, type BinView } from '../counts/bin-view.service.ts'
import { openAttention } from '../counts/levels.service.ts'
import type { Reader } from '../db/client.ts'
import type { Actor } from '../http/context.ts'
import { stuckJobs } from '../jobs/jobs.service.ts'
import { stuckMail } from '../mail/mail.service.ts'
import { askedPlaces } from '../policy/policy.service.ts'
import { gapsInShort } from '../replenishment/gap.service.ts'
import { listOrders } from '../replenishment/orders.service.ts'
import { outlookOf, type Outlook } from '../replenishment/worklist.service.ts'
import { recentMoves, reviewRows } from '../review/review.service.ts'

/** From this chance on, a place is said to perhaps run out before its delivery. Our choice. */
const worthSaying = 0.1
const listed = 8

/** What needs a look today; only the part of the caller's role is worked out. */
export async function readToday(db: Reader, clock: Clock, actor: Actor): Promise<Today> {
  if (actor.role === 'coordinator') return { coordinator: await coordinatorToday(db, clock, actor) }
  if (actor.role === 'reviewer') return { reviewer: await reviewerToday(db, clock, actor) }
  if (actor.role === 'administrator') return { administrator: await administratorToday(db, clock) }
  return {}
}

async function coordinatorToday(db: Reader, clock: Clock, actor: Actor): Promise<NonNullable<Today['coordinator']>> {
  const { timeZone } = await readHospital(db)
  const moment = momentOf(clock, timeZone)
  const views = await viewBins(db, moment, { roomIds: actor.roomIds, retired: false })
  const outlooks = await outlookOf(db, { now: clock.now(), timeZone }, views)
  const below = outlooks.filter((o) => o.view.bin.states.includes('below'))
  const open = await listOrders(db, { open: 'yes', page: 1, pageSize: 500 })
  return {
    cutOffs: cutOffsOf(below),
    toOrder: below.length,
    mayRunOut: outlooks
      .filter((o) => o.risk >= worthSaying && o.view.facts.hasItem)
      .sort((a, b) => b.risk - a.risk || a.view.row.id - b.view.row.id)
      .slice(0, listed)
      .map((o) => ({
        bin: o.view.bin,
        outBy: o.outBy.early,
        nextArrival: o.nextArrival?.toISOString() ?? null,
        risk: o.risk,
      })),
    countFirst: views
      .filter((v) => v.bin.states.includes('count-first'))
      .slice(0, listed)
      .map((v) => v.bin),
    lateOrders: open.items
      .filter((o) => o.state !== 'draft' && o.expectedOn !== null && o.expectedOn < moment.today)
      .map((o) => ({
        id: o.id,
        number: o.number,
        supplierName: o.supplierName,
        expectedOn: o.expectedOn!,
        workingDaysLate: workingDaysBetween(o.expectedOn!, moment.today),
      })),
    gaps: await gapsInShort(db, { now: moment.now, timeZone }, views),
    calendars: await emptyCalendars(db, clock),
    asked: await askedIn(db, views),
  }
}

/** Places in scope that wait for somebody's word. */
async function askedIn(db: Reader, views: BinView[]): Promise<number> {
  const asked = await askedPlaces(db)
  return views.filter((v) => (asked.get(v.row.id) ?? 0) > 0).length
}

/** One row per supplier that has something to order, the nearest cut-off first. */
function cutOffsOf(below: Outlook[]): NonNullable<Today['coordinator']>['cutOffs'] {
  const bySupplier = new Map<number, Outlook[]>()
  for (const o of below) {
    if (!o.supply || !o.orderBy || !o.firstArrival) continue
    const id = o.supply.supplier.id
    bySupplier.set(id, [...(bySupplier.get(id) ?? []), o])
  }
  return [...bySupplier.values()]
    .map((rows) => ({
      supplierId: String(rows[0]!.supply!.supplier.id),
      supplierName: rows[0]!.supply!.supplier.name,
      orderBy: rows[0]!.orderBy!.toISOString(),
      arrives: rows[0]!.firstArrival!.toISOString(),
      toOrder: rows.length,
    }))
    .sort((a, b) => a.orderBy.localeCompare(b.orderBy) || a.supplierName.localeCompare(b.supplierName))
}

async function reviewerToday(db: Reader, clock: Clock, actor: Actor): Promise<NonNullable<Today['reviewer']>> {
  const { timeZone } = await readHospital(db)
  const rows = await reviewRows(db, clock, actor, {})
  const moves = await recentMoves(db, clock)
  const views = await viewBins(db, momentOf(clock, timeZone), {
    roomIds: actor.roomIds,
    binIds: moves.map((m) => m.binId),
    retired: false,
  })
  const byId = new Map<number, BinView>(views.map((v) => [v.row.id, v]))
  return {
    due: rows.filter((r) => r.review === 'due').length,
    thisWeek: rows.filter((r) => r.review === 'this-week').length,
    proposed: rows.filter((r) => r.proposal !== null).length,
    moved: moves
      .filter((m) => byId.has(m.binId))
      .sort((a, b) => Math.abs(b.to - (b.from ?? 0)) - Math.abs(a.to - (a.from ?? 0)) || a.binId - b.binId)
      .slice(0, listed)
      .map((m) => ({ bin: byId.get(m.binId)!.bin, from: m.from, to: m.to, at: m.at.toISOString(), cause: m.cause })),
  }
}

async function administratorToday(db: Reader, clock: Clock): Promise<NonNullable<Today['administrator']>> {
  const problems: NonNullable<Today['administrator']>['problems'] = []
  const attention = await openAttention(db)
  if (attention > 0) {
    problems.push({
      what: `${attention} entries from phones could not be taken in.`,
      action: 'Ask the ward whose phone shows "Needs attention" to open it; nothing is lost.',
      to: null,
    })
  }
  const mail = await stuckMail(db)
  if (mail.length) {
    problems.push({
      what: `${mail.length} mails could not be sent: ${mail[0]!.lastError ?? ''}`,
      action: 'Check SMTP_URL and the mail server; they are tried again by themselves.',
      to: null,
    })
  }
  const jobs = await stuckJobs(db)
  if (jobs.length) {
    problems.push({
      what: `${jobs.length} background jobs keep failing: ${jobs[0]!.lastError ?? ''}`,
      action: 'Restart Brimline; if it stays, keep the log and ask for help.',
      to: null,
    })
  }
  for (const calendar of await emptyCalendars(db, clock)) {
    problems.push({
      what: `The calendar ${calendar.name} has no closed days in ${calendar.emptyYear}.`,
      action: 'Enter the days of that year, or read them from a file; until then every day counts as open.',
      to: `/hospital/calendars/${calendar.id}`,
    })
  }
  return { problems }
}
