const DAYS_PER_YEAR = 365

/**
 * Delivery cycles a year of one place: its use a year over what it orders at a time, but no more than there are
 * chances to order; an order then brings more than its usual quantity.
 *
 * Units: units of use and days; `reviewPeriodDays` 0 means an order at every moment. An estimate.
 *
 * @returns 0 without use
 */
export function cyclesPerYear(usePerDay: number, orderQuantity: number, reviewPeriodDays: number): number {
  const byUse = (Math.max(0, usePerDay) * DAYS_PER_YEAR) / orderQuantity
  return reviewPeriodDays > 0 ? Math.min(byUse, DAYS_PER_YEAR / reviewPeriodDays) : byUse
}
