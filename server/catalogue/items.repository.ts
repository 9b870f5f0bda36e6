import { and, asc, count, eq, inArray, isNotNull, isNull, like, or } from 'drizzle-orm'
import type { Reader, Tx } from '../db/client.ts'
import { movements } from '../counts/counts.tables.ts'
import {
  binAssignments,
  bins,
  itemBarcodes,
  itemPacks,
  items,
  lookalikes,
  suppliers,
  supplyAgreements,
} from './catalogue.tables.ts'
import type { ListFilter } from './places.repository.ts'

const columns = {
  item: items,
  orderUnit: itemPacks.orderUnit,
  unitsPerOrder: itemPacks.unitsPerOrder,
  supplierId: supplyAgreements.supplierId,
  supplierName: suppliers.name,
  supplierItem: supplyAgreements.supplierItem,
  price: supplyAgreements.price,
}
const base = (db: Reader) =>
  db
    .select(columns)
    .from(items)
    .leftJoin(itemPacks, and(eq(itemPacks.itemId, items.id), isNull(itemPacks.validTo)))
    .leftJoin(supplyAgreements, and(eq(supplyAgreements.itemId, items.id), eq(supplyAgreements.isPreferred, true)))
    .leftJoin(suppliers, eq(suppliers.id, supplyAgreements.supplierId))
export type ItemRow = Awaited<ReturnType<typeof base>>[number]

export async function listItemRows(
  db: Reader,
  filter: ListFilter & { ved?: 'V' | 'E' | 'D' },
): Promise<{ rows: ItemRow[]; total: number }> {
  const pattern = filter.q ? `%${filter.q.replace(/[\\%_]/g, '\\$&')}%` : null
  const where = and(
    filter.retired ? isNotNull(items.retiredAt) : isNull(items.retiredAt),
    filter.ved ? eq(items.ved, filter.ved) : undefined,
    pattern ? or(like(items.name, pattern), like(items.code, pattern), like(items.orderName, pattern)) : undefined,
  )
  const rows = await base(db)
    .where(where)
    .orderBy(asc(items.name), asc(items.id))
    .limit(filter.limit)
    .offset(filter.offset)
  const [total] = await db.select({ n: count() }).from(items).where(where)
  return { rows, total: total?.n ?? 0 }
}

export async function findItem(db: Reader, id: number): Promise<ItemRow | null> {
  const [row] = await base(db).where(eq(items.id, id))
  return row ?? null
}

export async function listCodesAndLookalikes(db: Reader, itemIds: number[]) {
  if (itemIds.length === 0) return { codes: [], others: [] }
  const codes = await db
    .select()
    .from(itemBarcodes)
    .where(inArray(itemBarcodes.itemId, itemIds))
    .orderBy(asc(itemBarcodes.id))
  const others = await db
    .select()
    .from(lookalikes)
    .where(inArray(lookalikes.itemId, itemIds))
    .orderBy(asc(lookalikes.otherItemId))
  return { codes, others }
}

export async function insertItem(tx: Tx, row: typeof items.$inferInsert): Promise<number> {
  const [made] = await tx.insert(items).values(row).$returningId()
  return made!.id
}

export async function updateItemRow(tx: Tx, id: number, set: Partial<typeof items.$inferInsert>): Promise<void> {
  if (Object.keys(set).length) await tx.update(items).set(set).where(eq(items.id, id))
}

/** Packs are dated: the present one ends when another begins. */
export async function replacePack(
  tx: Tx,
  itemId: number,
  pack: { orderUnit: string; unitsPerOrder: number },
  at: Date,
): Promise<void> {
  await tx
    .update(itemPacks)
    .set({ validTo: at })
    .where(and(eq(itemPacks.itemId, itemId), isNull(itemPacks.validTo)))
  await tx.insert(itemPacks).values({ itemId, ...pack, validFrom: at, validTo: null })
}

export async function replaceBarcodes(
  tx: Tx,
  itemId: number,
  codes: { gtin: string; level: 'each' | 'pack' }[],
): Promise<void> {
  await tx.delete(itemBarcodes).where(eq(itemBarcodes.itemId, itemId))
  if (codes.length) await tx.insert(itemBarcodes).values(codes.map((c) => ({ itemId, ...c })))
}

/** A pair looks alike both ways. */
export async function replaceLookalikes(tx: Tx, itemId: number, otherIds: number[]): Promise<void> {
  await tx.delete(lookalikes).where(or(eq(lookalikes.itemId, itemId), eq(lookalikes.otherItemId, itemId)))
  const rows = [...new Set(otherIds)].flatMap((otherItemId) => [
    { itemId, otherItemId },
    { itemId: otherItemId, otherItemId: itemId },
  ])
  if (rows.length) await tx.insert(lookalikes).values(rows)
}

export async function replaceAgreement(
  tx: Tx,
  itemId: number,
  row: Omit<typeof supplyAgreements.$inferInsert, 'itemId' | 'isPreferred'> | null,
): Promise<void> {
  await tx.update(supplyAgreements).set({ isPreferred: false }).where(eq(supplyAgreements.itemId, itemId))
  if (!row) return
  await tx
    .insert(supplyAgreements)
    .values({ ...row, itemId, isPreferred: true })
    .onDuplicateKeyUpdate({
      set: { supplierItem: row.supplierItem, price: row.price, currency: row.currency, isPreferred: true },
    })
}

export async function itemHasLedger(db: Reader, itemId: number): Promise<boolean> {
  const [row] = await db.select({ id: movements.id }).from(movements).where(eq(movements.itemId, itemId)).limit(1)
  return row !== undefined
}

export async function liveBinsOfItem(db: Reader, itemId: number): Promise<number[]> {
  const rows = await db
    .select({ id: bins.id })
    .from(binAssignments)
    .innerJoin(bins, eq(bins.id, binAssignments.binId))
    .where(and(eq(binAssignments.itemId, itemId), isNull(binAssignments.assignedTo), isNull(bins.retiredAt)))
  return rows.map((r) => r.id)
}

export async function liveBinsOfSuppliers(db: Reader, supplierIds: number[]): Promise<number[]> {
  if (supplierIds.length === 0) return []
  const rows = await db
    .select({ id: bins.id })
    .from(supplyAgreements)
    .innerJoin(
      binAssignments,
      and(eq(binAssignments.itemId, supplyAgreements.itemId), isNull(binAssignments.assignedTo)),
    )
    .innerJoin(bins, and(eq(bins.id, binAssignments.binId), isNull(bins.retiredAt)))
    .where(and(inArray(supplyAgreements.supplierId, supplierIds), eq(supplyAgreements.isPreferred, true)))
  return rows.map((r) => r.id)
}

/** Items among the given ids that exist. */
export async function existingItems(db: Reader, ids: number[]): Promise<Set<number>> {
  if (ids.length === 0) return new Set()
  const rows = await db.select({ id: items.id }).from(items).where(inArray(items.id, ids))
  return new Set(rows.map((r) => r.id))
}
