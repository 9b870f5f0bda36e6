const lastGaps = 12
const share = 0.8

/**
 * Days one has to expect between counts: the room's plan, or the 80th percentile of the bin's last 12 gaps where the
 * counts come later than planned. The percentile is the smallest gap that at least 80 % do not exceed.
 *
 * @param gapDays gaps between neighbouring counts, oldest first, in days
 */
export function countRhythm(gapDays: readonly number[], plannedDays: number): number {
  const recent = gapDays.slice(-lastGaps).sort((a, b) => a - b)
  const observed = recent[Math.ceil(share * recent.length) - 1] ?? 0
  return Math.max(plannedDays, observed)
}
