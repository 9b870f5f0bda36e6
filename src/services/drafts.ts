import { up, type RoundDraft } from '#shared/stored/draft/index.ts'
import { withDb } from './offline-db.ts'

const keyOf = (userId: string, roomId: string): string => `${userId}/${roomId}`

/** The round of one person in one room, where there is one. */
export async function readDraft(userId: string, roomId: string): Promise<RoundDraft | null> {
  return up(await withDb((db) => db.get('drafts', keyOf(userId, roomId))))
}

export async function draftsOf(userId: string): Promise<RoundDraft[]> {
  const rows = (await withDb((db) => db.getAll('drafts'))).map(up)
  return rows.filter((row): row is RoundDraft => row !== null && row.userId === userId)
}

export async function writeDraft(draft: RoundDraft): Promise<void> {
  const plain = JSON.parse(JSON.stringify(draft)) as RoundDraft
  await withDb((db) => db.put('drafts', plain, keyOf(draft.userId, draft.roomId)))
}

export async function deleteDraft(userId: string, roomId: string): Promise<void> {
  await withDb((db) => db.delete('drafts', keyOf(userId, roomId)))
}
