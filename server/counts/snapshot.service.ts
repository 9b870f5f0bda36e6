import type { Snapshot } from '#shared/contracts/counts.ts'
import { problem } from '#shared/contracts/problems.ts'
import type { Clock } from '../clock.ts'
import type { Reader } from '../db/client.ts'
import type { Actor } from '../http/context.ts'
import { momentOf, openUnits, viewBins, type BinView } from './bin-view.service.ts'
import {
  changedBins,
  listHolds,
  listSnapshotItems,
  listSnapshotPolicies,
  readRoomVersion,
  tombstonesSince,
} from './counts.repository.ts'

/** What of the hospital's settings a phone needs. */
export interface SnapshotSettings {
  timeZone: string
  vitalPolicyText: string
  vitalPolicyLink: string
}

/** All a phone keeps of one room, or what changed since the version it has. */
export async function readSnapshot(
  db: Reader,
  clock: Clock,
  actor: Actor,
  settings: SnapshotSettings,
  query: { roomId: string; since?: number },
): Promise<Snapshot> {
  const roomId = Number(query.roomId)
  if (actor.roomIds !== null && !actor.roomIds.includes(roomId)) throw problem('not-found')
  // The version is read first: what changes meanwhile is sent twice rather than never.
  const version = await readRoomVersion(db, roomId)
  if (version.version === 0) throw problem('not-found')
  const since = query.since ?? 0
  const reset = query.since === undefined || since > version.version || since < version.resetBefore
  const ids = reset ? undefined : await changedBins(db, roomId, since)
  const views = await viewBins(db, momentOf(clock, settings.timeZone), {
    roomIds: actor.roomIds,
    roomId,
    binIds: ids,
    retired: false,
  })
  const live = views.filter((v) => !v.bin.retired)
  const binIds = live.map((v) => v.row.id)
  const catalogue = await listSnapshotItems(db, [
    ...new Set(live.flatMap((v) => (v.row.itemId === null ? [] : [v.row.itemId]))),
  ])
  return {
    roomId: String(roomId),
    version: version.version,
    reset,
    bins: live.map((v) => v.bin),
    items: catalogue.items.map((i) => ({
      id: String(i.id),
      code: i.code,
      name: i.name,
      unitOfUse: i.unitOfUse,
      countUnit: i.countUnit,
      countNote: i.countNote,
      ved: i.ved,
      orderUnit: i.orderUnit ?? i.unitOfUse,
      packSize: i.packSize ?? 1,
      lookalikes: catalogue.lookalikes.filter((l) => l.itemId === i.id).map((l) => l.name),
    })),
    barcodes: catalogue.barcodes.map((b) => ({ gtin: b.gtin, itemId: String(b.itemId), level: b.level })),
    cautions: cautionsOf(settings, catalogue),
    holds: await holdsOf(db, live),
    policies: (await listSnapshotPolicies(db, binIds)).map(toPolicy),
    openLines: live.flatMap((v) =>
      v.openLines.map((l) => ({
        orderLineId: String(l.lineId),
        orderNumber: l.orderNumber ?? '',
        binId: String(l.binId),
        units: openUnits(l),
        putAway: l.putAway,
        expectedOn: l.expectedOn,
      })),
    ),
    tombstones: reset
      ? []
      : (await tombstonesSince(db, roomId, since)).filter((id) => !binIds.includes(id)).map(String),
    authzVersion: actor.authzVersion,
    serverTime: clock.now().toISOString(),
  }
}

type Catalogue = Awaited<ReturnType<typeof listSnapshotItems>>

/** Cautions defer to the facility: the hospital's own text where it has one. */
function cautionsOf(settings: SnapshotSettings, catalogue: Catalogue): Snapshot['cautions'] {
  const cautions: Snapshot['cautions'] = []
  if (settings.vitalPolicyText) {
    cautions.push({
      kind: 'vital-policy',
      itemId: null,
      text: settings.vitalPolicyText,
      link: settings.vitalPolicyLink || null,
    })
  }
  for (const item of catalogue.items) {
    const itemId = String(item.id)
    const others = catalogue.lookalikes.filter((l) => l.itemId === item.id).map((l) => l.name)
    if (others.length) {
      cautions.push({
        kind: 'look-alike',
        itemId,
        link: null,
        text: `Looks or sounds like ${others.join(', ')}. Read name, size and strength on the pack before you take or count it.`,
      })
    }
    if (item.isLatex) {
      cautions.push({
        kind: 'latex',
        itemId,
        link: null,
        text: 'Recorded as containing natural rubber latex. Check the pack; follow your latex policy.',
      })
    }
    if (item.isColdChain) {
      cautions.push({
        kind: 'cold-chain',
        itemId,
        link: null,
        text: 'Storage limits are printed on the pack. If it may have been outside them, hold it and ask pharmacy. This app does not measure temperature.',
      })
    }
  }
  return cautions
}

async function holdsOf(db: Reader, views: BinView[]): Promise<Snapshot['holds']> {
  const held = views.filter((v) => v.facts.held > 0)
  const reasons = await listHolds(
    db,
    held.map((v) => v.row.id),
  )
  return held.map((v) => ({
    binId: v.bin.id,
    quantity: v.facts.held,
    reason: reasons.find((r) => r.binId === v.row.id)?.reason ?? null,
  }))
}

function toPolicy(row: Awaited<ReturnType<typeof listSnapshotPolicies>>[number]): Snapshot['policies'][number] {
  const demand = (row.result as { demand?: { meanPerDay?: number; variancePerDay?: number } | null } | null)?.demand
  return {
    binId: String(row.binId),
    reorderPoint: row.reorderPoint,
    parLevel: row.parLevel,
    meanPerDay: demand?.meanPerDay ?? null,
    variancePerDay: demand?.variancePerDay ?? null,
    input: row.input,
  }
}
