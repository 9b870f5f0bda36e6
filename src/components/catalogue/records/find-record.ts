import { readBin, readItem } from '#shared/contracts/catalogue.ts'
import { problem } from '#shared/contracts/problems.ts'
import { call } from '#src/services/api.ts'
import { everyPage } from '#src/services/every-page.ts'
import type { AnyRecord, KindOfRecord } from './record-kinds.ts'

/** One record by its id, retired or not. Kinds without a call of their own are found in their list. */
export async function findRecord(kind: KindOfRecord, id: string): Promise<AnyRecord> {
  if (kind.kind === 'items') return (await call(readItem, { params: { id } })) as AnyRecord
  if (kind.kind === 'bins') return (await call(readBin, { params: { id } })) as AnyRecord
  for (const retired of ['no', 'yes']) {
    const all = await everyPage(
      async (page) =>
        (await call(kind.list, { query: { page, pageSize: 500, retired } })) as { items: AnyRecord[]; total: number },
    )
    const found = all.find((record) => record.id === id)
    if (found) return found
  }
  throw problem('not-found')
}
