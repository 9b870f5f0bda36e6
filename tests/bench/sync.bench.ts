import { uuidv7 } from 'uuidv7'
import { createBin } from '#server/catalogue/bins.service.ts'
import { createHospital } from '#server/catalogue/hospital.service.ts'
import { createItem } from '#server/catalogue/items.service.ts'
import { createRoom, createSupplier, createWard } from '#server/catalogue/places.service.ts'
import { movableClock } from '#server/clock.ts'
import { syncOperations } from '#server/counts/counts.service.ts'
import { inTransaction } from '#server/db/transaction.ts'
import { createUser } from '#server/people/people.service.ts'
import { startMoment, testHospital } from '../support/app.ts'
import { createTestDatabase } from '../support/database.ts'

const batches = 10
const perBatch = 50
const database = await createTestDatabase()
const clock = movableClock(startMoment)

const { userId, binIds } = await inTransaction(database.db, async (tx) => {
  await createHospital(tx, clock, testHospital)
  const who = {
    name: 'Bench',
    email: 'bench@tallowmere.example',
    staffCode: 'B-1',
    role: 'nurse' as const,
    roomIds: null,
    password: 'a long enough one',
  }
  const user = await createUser(tx, clock, null, who)
  const actorId = Number(user.id)
  const ward = await createWard(tx, clock, actorId, {
    code: 'W',
    name: 'Ward',
    kind: 'general',
    site: '',
    calendarId: null,
  })
  const room = await createRoom(tx, clock, actorId, {
    code: 'R',
    name: 'Room',
    wardId: ward.id,
    countEveryDays: 1,
    countDays: '',
    mode: 'calculated',
  })
  const times = {
    orderDays: '',
    cutOff: '10:00',
    arrivalDays: '',
    arrivalTime: '14:00',
    leadWorkingDays: 1,
    minimumOrder: 0,
    leadTimeDays: null,
    leadTimeSd: null,
    calendarId: null,
  }
  const supplier = await createSupplier(tx, clock, actorId, {
    code: 'S',
    name: 'Stores',
    email: '',
    kind: 'stores',
    ...times,
  })
  const item = await createItem(tx, clock, actorId, {
    code: 'I',
    name: 'Item',
    orderName: 'Item',
    unitOfUse: 'each',
    unitCode: 'C62',
    countUnit: 'each',
    countNote: '',
    ved: 'E',
    category: '',
    shelfLifeDays: null,
    minShelfDays: null,
    latex: false,
    coldChain: false,
    supplierId: supplier.id,
    supplierItem: '',
    price: null,
    orderUnit: 'box',
    unitsPerOrder: 10,
    gtins: [],
    lookalikeIds: [],
  })
  const fields = {
    roomId: room.id,
    bay: '',
    shelf: '',
    kind: 'counted' as const,
    overflowOf: null,
    itemId: item.id,
    capacity: null,
    enteredReorderPoint: null,
    enteredPar: null,
  }
  const made: string[] = []
  for (let i = 0; i < perBatch; i += 1)
    made.push((await createBin(tx, clock, { id: actorId, roomIds: null }, fields)).id)
  return { userId: user.id, binIds: made }
})

const owner = { id: Number(userId), role: 'nurse' as const, roomIds: null, authzVersion: 1 }
let sequence = 0
async function ours(): Promise<void> {
  clock.set(new Date(clock.now().getTime() + 86_400_000))
  const items = binIds.map((binId) => ({
    opId: uuidv7(),
    v: 1,
    localSeq: (sequence += 1),
    type: 'count',
    binId,
    quantity: 20,
    deviceTime: clock.now().toISOString(),
  }))
  const { results } = await syncOperations(database.db, clock, owner, {
    deviceId: 'bench',
    userId,
    appVersion: '1',
    items,
  })
  if (results.some((r) => r.status !== 'accepted')) throw new Error(JSON.stringify(results[0]))
}

const connection = await database.pool.getConnection()
/** The least a durable entry costs: one row in one committed transaction. */
async function bare(): Promise<void> {
  for (let i = 0; i < perBatch; i += 1) {
    await connection.query('BEGIN')
    await connection.query('INSERT INTO jobs (kind, payload, run_at, attempts, created_at) VALUES (?, ?, ?, 0, ?)', [
      'bench',
      '{}',
      new Date(),
      new Date(),
    ])
    await connection.query('COMMIT')
  }
}

const timed = async (work: () => Promise<void>): Promise<number> => {
  const start = process.hrtime.bigint()
  await work()
  return Number(process.hrtime.bigint() - start) / 1e6 / perBatch
}
const median = (values: number[]): number => values.sort((a, b) => a - b)[Math.floor(values.length / 2)]!
await ours()
await bare()
const rounds: (readonly [number, number])[] = []
for (let i = 0; i < batches; i += 1) rounds.push([await timed(ours), await timed(bare)])
const a = median(rounds.map((r) => r[0]))
const b = median(rounds.map((r) => r[1]))
process.stdout.write(
  `sync: a count taken in (locked, folded, flagged, audited, committed) in ${a.toFixed(1)} ms; one bare committed row in ${b.toFixed(1)} ms; ratio ${(a / b).toFixed(1)}\n`,
)
connection.release()
await database.drop()
