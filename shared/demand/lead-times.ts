/** Goods of one order line on their way; both ways are written of the same goods. */
export interface LineArrival {
  /** `arrival`: seen at the ward; `put-away`: on the shelf. */
  way: 'arrival' | 'put-away'
  /** Epoch ms at which it counts, however late it was keyed. */
  at: number
  quantity: number
  /** Written by the question about a rise: the true moment is not known. */
  byRiseQuestion: boolean
}

/** One sent order line. Units of use. */
export interface SentLine {
  /** Epoch ms. */
  sentAt: number
  units: number
  cancelledUnits: number
  arrivals: readonly LineArrival[]
}

/** A line has come when so many tenths of what was not cancelled are there. */
const tenthsThere = 9
const mostDelays = 60
const fewestDelays = 5
const plausibleDeviations = 2

/**
 * When an order line had come: the moment by which 90 % of what was not cancelled had been seen to arrive or had been
 * put away, whichever came first. What the question about a rise wrote is not used.
 * Source: statistics 4.0.
 *
 * @returns epoch ms; null when it was cancelled, has not come that far, or counts from before it was sent
 */
export function leadTimeObservation(line: SentLine): { arrivedAt: number } | null {
  const wanted = line.units - line.cancelledUnits
  if (!(wanted > 0)) return null
  const reached = (['arrival', 'put-away'] as const).flatMap((way) => reachedAt(line.arrivals, way, wanted) ?? [])
  const arrivedAt = Math.min(...reached)
  return reached.length > 0 && arrivedAt >= line.sentAt ? { arrivedAt } : null
}

function reachedAt(arrivals: readonly LineArrival[], way: LineArrival['way'], wanted: number): number | null {
  let there = 0
  for (const arrival of arrivals.filter((a) => a.way === way && !a.byRiseQuestion).sort((a, b) => a.at - b.at)) {
    there += arrival.quantity
    if (there * 10 >= wanted * tenthsThere) return arrival.at
  }
  return null
}

/**
 * The lead times to hand to a policy as `observedDays`: the stated one and what deliveries of the past added to it or
 * took off (statistics 1.3). The newest 60 count, each to the half day, none below 0.
 *
 * Few deliveries are blended with the stated time: below 5 it fills up to 5; below 1 ÷ (1 − service level), too few to
 * have seen one bad delivery, one more is added that takes the longest plausible time, the stated mean and two
 * deviations or the longest seen if that is longer.
 *
 * @param delays days beyond the stated arrival, newest first; negative when early
 * @param stated lead time as stated or taken from the calendar
 * @param serviceLevel the aim, below 1
 * @returns days; empty without deliveries, so that mean and deviation stand alone
 */
export function blendLeadTimes(
  delays: readonly number[],
  stated: { meanDays: number; sdDays: number },
  serviceLevel: number,
): number[] {
  const seen = delays.slice(0, mostDelays).map((delay) => Math.max(0, stated.meanDays + Math.round(delay * 2) / 2))
  if (seen.length === 0) return []
  const filled = [...seen, ...Array<number>(Math.max(0, fewestDelays - seen.length)).fill(stated.meanDays)]
  // Rounded, since 1 / (1 − 0.95) comes out a little above 20.
  const enough = Math.round(1e6 / (1 - serviceLevel)) / 1e6
  if (seen.length >= enough) return filled
  return [...filled, Math.max(stated.meanDays + plausibleDeviations * stated.sdDays, ...seen)]
}
