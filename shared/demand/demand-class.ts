/** The four classes of demand of Syntetos, Boylan & Croston. */
export type DemandClass = 'smooth' | 'erratic' | 'intermittent' | 'lumpy'

/** Average interval between demands and squared coefficient of variation of their sizes. */
export interface DemandShape {
  /** In periods. */
  adi: number
  cv2: number
}

interface Period {
  exposureDays: number
  quantity: number
}

// Cut-offs of Syntetos, Boylan & Croston, JORS 56 (2005) 495-503.
const cutAdi = 1.32
const cutCv2 = 0.49
const fewestDemands = 2

/**
 * The two figures behind the class. The source has equal periods; counts come as they come. So each interval is one
 * period, whatever its length, and its size is its use a usual day: an interval twice as long with twice the use is no
 * larger demand. With equal intervals these are the figures of the source (variance with divisor n − 1).
 *
 * @param intervals used ones, merged
 * @returns null with fewer than two periods with use
 */
export function demandShape(intervals: readonly Period[]): DemandShape | null {
  const sizes = intervals.filter((i) => i.quantity > 0).map((i) => i.quantity / i.exposureDays)
  if (sizes.length < fewestDemands) return null
  const mean = sizes.reduce((sum, size) => sum + size, 0) / sizes.length
  const variance = sizes.reduce((sum, size) => sum + (size - mean) ** 2, 0) / (sizes.length - 1)
  return { adi: intervals.length / sizes.length, cv2: variance / (mean * mean) }
}

/**
 * The class of a demand: a label, and a reason for caution when lumpy; no method is chosen by it (statistics 3.3).
 * Agrees with the warning `lumpy` of a policy: above 1.32 and 0.49, not at them.
 *
 * @returns null where it is undefined (`demandShape`)
 * @example demandClass([{ exposureDays: 7, quantity: 3 }, { exposureDays: 7, quantity: 4 }]) // => 'smooth'
 */
export function demandClass(intervals: readonly Period[]): DemandClass | null {
  const shape = demandShape(intervals)
  if (shape === null) return null
  if (shape.adi > cutAdi) return shape.cv2 > cutCv2 ? 'lumpy' : 'intermittent'
  return shape.cv2 > cutCv2 ? 'erratic' : 'smooth'
}
