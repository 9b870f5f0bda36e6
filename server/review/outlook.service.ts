import type { ClassOutlook } from '#shared/contracts/policy.ts'
import { cyclesPerYear } from '#shared/policy/cycles-per-year.ts'
import { readHospital } from '../catalogue/hospital.service.ts'
import type { Clock } from '../clock.ts'
import { momentOf, viewBins } from '../counts/bin-view.service.ts'
import type { Reader } from '../db/client.ts'
import type { Actor } from '../http/context.ts'
import { currentFigures } from '../policy/policy.service.ts'

/**
 * What the figures in force come to in a year, by class: run-outs = Σ delivery cycles a year × (1 − chance that one does
 * not run out). An estimate: it holds if counts keep their rhythm and use stays as it is.
 */
export async function readClassOutlook(db: Reader, clock: Clock, actor: Actor): Promise<{ items: ClassOutlook[] }> {
  const { timeZone, levels } = await readHospital(db)
  const views = await viewBins(db, momentOf(clock, timeZone), { roomIds: actor.roomIds, retired: false })
  const figures = new Map((await currentFigures(db)).map((f) => [f.binId, f]))
  const places = views.filter((v) => v.row.itemId !== null && v.row.overflowOf === null)
  return {
    items: (['V', 'E', 'D'] as const).map((ved) => {
      const own = places.filter((v) => v.row.ved === ved)
      const perYear = own.flatMap((v) => {
        const f = figures.get(v.row.id)
        if (!f || f.sure === null || f.meanPerDay === null || !f.orderQuantity) return []
        return [cyclesPerYear(f.meanPerDay, f.orderQuantity, f.reviewPeriodDays ?? 0) * (1 - f.sure)]
      })
      return {
        ved,
        target: levels[ved],
        places: own.length,
        workedOut: perYear.length,
        runOutsPerYear: perYear.reduce((sum, n) => sum + n, 0),
      }
    }),
  }
}
