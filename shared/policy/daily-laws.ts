import { pointLaw } from './demand-law.ts'
import type { DemandLaw } from './demand-law.ts'
import { refused } from './policy-input-error.ts'

/** Most multiplications spent on one convolution; beyond it the caller is told to take another method. */
const MOST_STEPS = 2e7

/**
 * Demand over `days` whole days when daily amounts are drawn again and again from the days seen: the exact
 * `days`-fold convolution of the empirical law, without random numbers.
 *
 * Shape: `daily` whole numbers >= 0 with weights above 0. Source: statistics, 2.7 (`bootstrap_exact`).
 *
 * @throws {PolicyInputError} when the convolution would take too long
 */
export function bootstrapLaw(daily: { quantity: number; weight: number }[], days: number): DemandLaw {
  if (days === 0) return pointLaw(0)
  const total = daily.reduce((sum, day) => sum + day.weight, 0)
  const share = new Map<number, number>()
  for (const day of daily) share.set(day.quantity, (share.get(day.quantity) ?? 0) + day.weight / total)
  const largest = Math.max(...share.keys())
  if ((days * days * largest * share.size) / 2 > MOST_STEPS)
    throw refused('/method', 'too many days and units to resample exactly; take negative-binomial')
  let masses = Float64Array.of(1)
  for (let day = 0; day < days; day++) {
    const next = new Float64Array(masses.length + largest)
    for (const [quantity, weight] of share) {
      for (let y = 0; y < masses.length; y++) next[y + quantity]! += masses[y]! * weight
    }
    masses = next
  }
  return massesLaw(masses)
}

function massesLaw(masses: Float64Array): DemandLaw {
  let mean = 0
  let square = 0
  const cumulated = new Float64Array(masses.length)
  let reached = 0
  masses.forEach((mass, y) => {
    mean += mass * y
    square += mass * y * y
    reached += mass
    cumulated[y] = Math.min(1, reached)
  })
  cumulated[masses.length - 1] = 1
  return {
    mean,
    variance: Math.max(0, square - mean * mean),
    slack: 1e-12,
    cdf: (r) => (r < 0 ? 0 : cumulated[Math.min(masses.length - 1, Math.floor(r))]!),
    loss: (r) => masses.reduce((sum, mass, y) => sum + mass * Math.max(0, y - r), 0),
  }
}

/**
 * Demand over `days` whole days as the sums of all overlapping windows of that length: keeps whatever follows from
 * day to day, but holds only about n/days independent windows.
 *
 * Shape: `daily` oldest first, one entry a day, at least `days` of them. Variance with divisor W - 1.
 * Source: statistics, 2.7 (`overlap_empirical`).
 */
export function windowLaw(daily: number[], days: number): DemandLaw {
  if (days === 0) return pointLaw(0)
  const sums: number[] = []
  let running = 0
  daily.forEach((quantity, day) => {
    running += quantity - (day >= days ? daily[day - days]! : 0)
    if (day >= days - 1) sums.push(running)
  })
  const mean = sums.reduce((total, value) => total + value, 0) / sums.length
  const squares = sums.reduce((total, value) => total + (value - mean) ** 2, 0)
  return {
    mean,
    variance: sums.length > 1 ? squares / (sums.length - 1) : 0,
    cdf: (r) => sums.filter((value) => value <= r + 1e-9).length / sums.length,
    loss: (r) => sums.reduce((total, value) => total + Math.max(0, value - r), 0) / sums.length,
  }
}
