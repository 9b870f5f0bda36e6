import { protectionInterval } from '#shared/calendar/protection-interval.ts'
import { learnDemand } from '#shared/demand/learn-demand.ts'
import type { Random } from '#shared/kernel/random.ts'
import { drawNegativeBinomial } from '#shared/kernel/random-laws.ts'
import { fold } from '#shared/ledger/fold.ts'
import type { LedgerRow } from '#shared/ledger/movement.ts'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { negativeBinomialCdf } from '#shared/stats/negative-binomial-cdf.ts'

const dayMs = 86_400_000
const packSize = 10
const leadDays = 2
const plannedRhythmDays = 4

/** What goes wrong in a simulated ward. Shares of 1. */
export interface WardTrouble {
  /** Of counts: written down later than others that were taken after them */
  enteredLate?: number
  /** Of deliveries: put away without a word */
  unkeyed?: number
  /** Whether the question after an unexplained rise is answered, which writes the delivery before the count */
  answered?: boolean
  /** Of planned counts: not made, the next one comes a whole rhythm later */
  missed?: number
  /** Packs of 10 ordered at a time */
  packs?: number
  /** Units at which the ward orders so far; low enough, the shelf runs out */
  orderAt?: number
}

/** A ward bin: its ledger, and how it goes on. Demand is negative binomial at these figures. */
export interface SimulatedBin {
  rows: LedgerRow[]
  perDay: number
  ratio: number
  trouble: WardTrouble
}

/**
 * Plays half a year of one bin: counts every 4 days, at which packs are ordered when few are left and nothing is under
 * way, deliveries 2 days later, use between them as far as there is any on the shelf.
 */
export function simulateBin(random: Random, trouble: WardTrouble, perDay = 2, ratio = 2, days = 180): SimulatedBin {
  const rows: LedgerRow[] = []
  const add = (type: string, quantity: number, day: number, statedDay = day): void => {
    const i = rows.length
    const at = { effectiveAt: Math.round(day * dayMs), statedAt: Math.round(statedDay * dayMs) }
    const from = { opId: `op-${i}`, part: 0, deviceId: 'd', localSeq: i, targetOpId: null, flags: [] }
    rows.push({ ...from, ...at, type, quantity })
  }
  const { orderAt = 25, unkeyed = 0, answered = false, enteredLate = 0 } = trouble
  const orderUnits = packSize * (trouble.packs ?? 4)
  let shelf = orderAt + orderUnits
  let record = shelf
  let arrivesOn = Infinity
  let clock = 0
  const useUntil = (day: number): void => {
    if (day > clock) shelf -= Math.min(shelf, drawNegativeBinomial(random, perDay * (day - clock), ratio))
    clock = day
  }
  for (let day = 0; day <= days; day += nextGap(random, trouble)) {
    if (arrivesOn <= day) {
      useUntil(arrivesOn)
      shelf += orderUnits
      const isSilent = random() < unkeyed
      if (!isSilent) {
        add('receipt', orderUnits, clock)
        record += orderUnits
      }
      arrivesOn = Infinity
    }
    useUntil(day)
    if (shelf - record > packSize && answered) add('receipt', orderUnits, day - 0.01)
    add('count', shelf, day, random() < enteredLate ? day + 6 : day)
    record = shelf
    if (shelf <= orderAt && arrivesOn === Infinity) arrivesOn = day + leadDays
  }
  return { rows: [...rows].sort((a, b) => a.statedAt - b.statedAt), perDay, ratio, trouble }
}

/** Days until the next count that is really made. */
function nextGap(random: Random, { missed = 0 }: WardTrouble): number {
  let gap = plannedRhythmDays
  while (random() < missed) gap += plannedRhythmDays
  return gap
}

/** The way of the product from the ledger to the input of a policy, on the day of the last count. */
export function inputFromLedger({ rows }: SimulatedBin): PolicyInput | null {
  const learned = learnDemand(fold(rows).rows, { packSize, plannedRhythmDays })
  if (learned.lastCount === null) return null
  const { at } = learned.lastCount
  const moment = { countedAt: at, asOf: at, rhythmDays: learned.rhythmDays }
  const { leadMeanDays, reviewDays } = protectionInterval({ leadDays }, moment)
  return {
    intervals: learned.forPolicy,
    leadTime: { meanDays: leadMeanDays },
    reviewPeriodDays: reviewDays,
    wastagePerDay: learned.wastagePerDay,
    serviceLevel: 0.98,
    order: { packSize },
  }
}

/**
 * How often a cycle that starts at this level really lasts: until what the next count that is made orders has come,
 * exactly, over all gaps that counts can have.
 */
export function achievedInWard({ perDay, ratio, trouble }: SimulatedBin, level: number): number {
  const missed = trouble.missed ?? 0
  let sum = 0
  let share = 1 - missed
  for (let gaps = 1; share > 1e-9; gaps++, share *= missed) {
    const mean = perDay * (plannedRhythmDays * gaps + leadDays)
    sum += share * negativeBinomialCdf(level, mean / (ratio - 1), 1 / ratio)
    if (missed === 0) break
  }
  return sum
}
