import type { Item } from '#shared/contracts/catalogue.ts'
import { fieldProblem, problem } from '#shared/contracts/problems.ts'
import { toGtin14 } from '#shared/barcode/gtin.ts'
import { audit } from '../audit/audit.service.ts'
import type { Clock } from '../clock.ts'
import { touchBins } from '../counts/levels.service.ts'
import type { Reader, Tx } from '../db/client.ts'
import type { Actor } from '../http/context.ts'
import { readHospital } from './hospital.service.ts'
import * as repo from './items.repository.ts'
import { findSupplier } from './places.repository.ts'
import { changeOf, codeTakenProblem, listAnswer, listFilter, type ListQuery } from './places.service.ts'

async function toItems(db: Reader, rows: repo.ItemRow[]): Promise<Item[]> {
  const { codes, others } = await repo.listCodesAndLookalikes(
    db,
    rows.map((r) => r.item.id),
  )
  return rows.map(({ item, ...more }) => ({
    id: String(item.id),
    code: item.code,
    name: item.name,
    orderName: item.orderName,
    unitOfUse: item.unitOfUse,
    unitCode: item.unitCode,
    countUnit: item.countUnit,
    countNote: item.countNote,
    ved: item.ved,
    category: item.category,
    shelfLifeDays: item.shelfLifeDays,
    minShelfDays: item.minShelfDays,
    latex: item.isLatex,
    coldChain: item.isColdChain,
    supplierId: more.supplierId === null ? null : String(more.supplierId),
    supplierName: more.supplierName,
    supplierItem: more.supplierItem ?? '',
    price: more.price,
    orderUnit: more.orderUnit ?? item.unitOfUse,
    unitsPerOrder: more.unitsPerOrder ?? 1,
    gtins: codes.filter((c) => c.itemId === item.id).map((c) => ({ gtin: c.gtin, level: c.level })),
    lookalikeIds: others.filter((o) => o.itemId === item.id).map((o) => String(o.otherItemId)),
    retired: item.retiredAt !== null,
  }))
}

export async function listItems(db: Reader, query: ListQuery & { ved?: 'V' | 'E' | 'D' }) {
  const { rows, total } = await repo.listItemRows(db, { ...listFilter(query), ved: query.ved })
  return listAnswer(await toItems(db, rows), total, query)
}

export async function readItem(db: Reader, id: number): Promise<Item> {
  const row = await repo.findItem(db, id)
  if (!row) throw problem('not-found')
  return (await toItems(db, [row]))[0]!
}

export type ItemFields = Omit<Item, 'id' | 'retired' | 'supplierName'>
type Change = Partial<ItemFields> & { retired?: boolean }

/** Parts of an item that stand in tables of their own. */
async function writeParts(tx: Tx, id: number, input: Change, before: Item | null, now: Date): Promise<void> {
  const orderUnit = input.orderUnit ?? before?.orderUnit ?? ''
  const unitsPerOrder = input.unitsPerOrder ?? before?.unitsPerOrder ?? 1
  if (!before || orderUnit !== before.orderUnit || unitsPerOrder !== before.unitsPerOrder) {
    await repo.replacePack(tx, id, { orderUnit, unitsPerOrder }, now)
  }
  if (input.gtins)
    await repo.replaceBarcodes(
      tx,
      id,
      input.gtins.map((g, i) => ({ ...g, gtin: checkedGtin(g.gtin, i) })),
    )
  if (input.lookalikeIds) await repo.replaceLookalikes(tx, id, await checkedLookalikes(tx, id, input.lookalikeIds))
  const supply = input.supplierId !== undefined || input.supplierItem !== undefined || input.price !== undefined
  if (supply || !before) await writeAgreement(tx, id, { ...before, ...input })
}

async function writeAgreement(tx: Tx, id: number, item: Change): Promise<void> {
  if (!item.supplierId) return repo.replaceAgreement(tx, id, null)
  const supplier = await findSupplier(tx, Number(item.supplierId))
  if (!supplier || supplier.retiredAt) throw fieldProblem('/supplierId', 'choose a supplier that is in use')
  const { currency } = await readHospital(tx)
  await repo.replaceAgreement(tx, id, {
    supplierId: supplier.id,
    supplierItem: item.supplierItem ?? '',
    price: item.price ?? null,
    currency,
  })
}

function checkedGtin(gtin: string, index: number): string {
  const whole = toGtin14(gtin)
  if (whole === null)
    throw fieldProblem(`/gtins/${index}/gtin`, 'the last digit does not fit the others: check the number on the pack')
  return whole
}

async function checkedLookalikes(tx: Tx, id: number, otherIds: string[]): Promise<number[]> {
  const ids = otherIds.map(Number)
  const known = await repo.existingItems(tx, ids)
  const wrong = ids.findIndex((other) => other === id || !known.has(other))
  if (wrong >= 0) throw fieldProblem(`/lookalikeIds/${wrong}`, 'choose another item that exists')
  return ids
}

const columns = (input: Change) => ({
  code: input.code,
  name: input.name,
  orderName: input.orderName,
  unitOfUse: input.unitOfUse,
  unitCode: input.unitCode,
  countUnit: input.countUnit,
  countNote: input.countNote,
  ved: input.ved,
  category: input.category,
  shelfLifeDays: input.shelfLifeDays,
  minShelfDays: input.minShelfDays,
  isLatex: input.latex,
  isColdChain: input.coldChain,
  retired: input.retired,
})

export async function createItem(tx: Tx, clock: Clock, actorId: number, input: ItemFields): Promise<Item> {
  const { latex: isLatex, coldChain: isColdChain, ...rest } = input
  const row = { ...rest, isLatex, isColdChain, retiredAt: null }
  const id = await repo.insertItem(tx, row).catch(codeTakenProblem)
  await writeParts(tx, id, input, null, clock.now())
  await audit(tx, {
    at: clock.now(),
    userId: actorId,
    action: 'item-added',
    subject: 'item',
    subjectId: id,
    after: input,
  })
  return readItem(tx, id)
}

export async function updateItem(tx: Tx, clock: Clock, actor: Actor, id: number, input: Change): Promise<Item> {
  const before = await readItem(tx, id)
  const now = clock.now()
  const bins = await repo.liveBinsOfItem(tx, id)
  if (input.retired && bins.length)
    throw problem('in-use', 'Places still hold this item. Give them another item first.')
  if (input.unitOfUse !== undefined && input.unitOfUse !== before.unitOfUse && (await repo.itemHasLedger(tx, id))) {
    throw fieldProblem('/unitOfUse', 'counts were made in this unit, so it cannot change. Add a new item instead.')
  }
  await repo.updateItemRow(tx, id, changeOf(columns(input), now)).catch(codeTakenProblem)
  await writeParts(tx, id, input, before, now)
  await audit(tx, {
    at: now,
    userId: actor.id,
    action: 'item-changed',
    subject: 'item',
    subjectId: id,
    before,
    after: input,
  })
  const cause =
    input.ved !== undefined && input.ved !== before.ved
      ? 'service-level'
      : input.supplierId !== undefined
        ? 'calendar'
        : 'entered'
  await touchBins(tx, now, bins, cause)
  return readItem(tx, id)
}
