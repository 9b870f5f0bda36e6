import { DateTime } from 'luxon'
import { audit } from '../audit/audit.service.ts'
import type { Clock } from '../clock.ts'
import type { Db, Tx } from '../db/client.ts'
import { inTransaction } from '../db/transaction.ts'
import { insertHistoryStart, insertPlannedChange } from './demo.repository.ts'
import { marker } from './history-load.ts'
import { readDirectory, type Directory } from './places.ts'
import { demoZone } from './simulation/simulator.ts'
import { story } from './story.ts'

/** What people of the demo hospital decided beside counting: a ward that moved, and changes they know are coming. */
export async function decide(db: Db, clock: Clock): Promise<void> {
  const known = await readDirectory(db, clock)
  const today = DateTime.fromJSDate(clock.now(), { zone: demoZone }).startOf('day')
  const by = known.staff.get(story.moved.by)!.id
  await inTransaction(db, async (tx) => {
    await moveWard(tx, clock, known, by, today)
    for (const change of story.ahead) await plan(tx, clock, known, by, today, change)
    await marker(tx, clock.now(), 'demo-decided', { changes: story.ahead.length })
  })
}

/** Counts from before the move belong to another ward. */
async function moveWard(tx: Tx, clock: Clock, known: Directory, by: number, today: DateTime): Promise<void> {
  const { room, daysAgo, reason } = story.moved
  const from = today.minus({ days: daysAgo }).set({ hour: 6 })
  for (const place of known.places.values()) {
    if (place.plan.room.code !== room) continue
    await insertHistoryStart(tx, {
      binId: place.binId,
      assignmentId: place.assignmentId,
      fromAt: from.toJSDate(),
      reason,
      createdBy: by,
      createdAt: clock.now(),
    })
    await audit(tx, {
      at: clock.now(),
      userId: by,
      action: 'demand-history-start',
      subject: 'bin',
      subjectId: place.binId,
      after: { from: from.toUTC().toISO() },
      reason,
    })
  }
}

async function plan(
  tx: Tx,
  clock: Clock,
  known: Directory,
  by: number,
  today: DateTime,
  change: (typeof story.ahead)[number],
): Promise<void> {
  const here = [...known.places.values()].filter((p) => p.plan.room.code === change.room)
  const itemIds = here.filter((p) => change.items.some((code) => code === p.plan.item.code)).map((p) => p.itemId)
  const id = await insertPlannedChange(tx, {
    name: change.name,
    roomId: here[0]!.view.row.roomId,
    itemIds,
    kind: change.kind,
    unitsPerCase: change.unitsPerCase,
    casesPerDay: change.casesPerDay,
    weekdays: change.weekdays,
    startsOn: today.plus({ days: change.from }).toISODate() ?? '',
    endsOn: today.plus({ days: change.to }).toISODate(),
    reason: change.reason,
    createdBy: by,
    createdAt: clock.now(),
  })
  await audit(tx, {
    at: clock.now(),
    userId: by,
    action: 'planned-change-added',
    subject: 'planned-change',
    subjectId: id,
    after: { name: change.name },
    reason: change.reason,
  })
}
