/** What one bin brings to a pool: its effective, forgotten figures. Units of use and days of exposure. */
export interface PoolMember {
  key: string
  wardId: string
  quantity: number
  exposureDays: number
  /** Variance-to-mean ratio of its own counts; null where they cannot tell */
  dispersion: number | null
  /** Degrees of freedom of that ratio: effective intervals less one */
  freedom: number
}

/** What like bins tell about a bin before, and beside, its own counts. */
export interface PoolPrior {
  /** Degrees of freedom the dispersion of the pool stands for */
  nu0: number
  /** Variance-to-mean ratio to expect */
  w0: number
  /** Rates of like wards as a gamma law: a units in b days; null where only the dispersion is shared */
  rate: { a: number; b: number } | null
  basis: 'item' | 'category'
  members: number
  wards: number
}

/** Fewer wards cannot tell how rates differ between wards; fewer items not how uneven use is (statistics, 4.7). */
const FEWEST_WARDS = 5
const FEWEST_ITEMS = 10
const POOLED_FREEDOM = 8
/** Where the pool holds rates but no dispersion, the prior of a bin on its own stays. */
const ALONE = { nu0: 4, w0: 2 }
/** A ratio near 0 out of few counts is luck; it must not pull the mean of the pool to nothing. */
const SMALLEST_DISPERSION = 0.05
/** Wards never differ by less than this squared share of their rate: a stays at or below 400. */
const SMALLEST_SPREAD = 1 / 400

/**
 * The prior of a bin from like bins, by moments.
 *
 * Rate and dispersion over the same item in wards of one kind when it was counted in at least 5 wards; the dispersion
 * alone over the category when at least 10 of its items tell one; else null. With exposure T_j and use X_j of J members:
 * m = sum X / sum T, S = sum T_j (X_j/T_j - m)^2, tau^2 = [S - (J - 1) w0 m]/[T - sum T_j^2/T], at least m^2/400,
 * a = m^2/tau^2, b = m/tau^2. w0 = max(1, mean of the members' ratios weighted by their degrees of freedom, each at
 * least 0.05), nu0 = 8. The bin's own counts belong to its pool, as in the simulation the figures of 4.7 come from.
 *
 * With no use anywhere (m = 0) rates have no spread to estimate: the item then tells nothing, and the category is asked.
 * Where the item tells a rate but no dispersion, that of the category is taken, else 2 with 4 degrees of freedom.
 * Shape: `sameCategory` holds the members by item. Members without exposure are passed over.
 * Source: statistics, 4.7; D. Clayton & J. Kaldor, Biometrics 43 (1987); R. Marshall, Applied Statistics 40 (1991).
 *
 * @returns null when neither item nor category is wide enough
 */
export function poolPrior(
  sameItem: readonly PoolMember[],
  sameCategory: readonly (readonly PoolMember[])[],
): PoolPrior | null {
  const bins = sameItem.filter(({ exposureDays }) => exposureDays > 0)
  const wards = countWards(bins)
  const category = categoryPrior(sameCategory)
  if (wards < FEWEST_WARDS) return category
  const seen = meanDispersion(bins)
  const spread = seen !== null ? { nu0: POOLED_FREEDOM, w0: seen } : (category ?? ALONE)
  const rate = rateLaw(bins, spread.w0)
  if (rate === null) return category
  return { nu0: spread.nu0, w0: spread.w0, rate, basis: 'item', members: bins.length, wards }
}

/**
 * The share of a bin's own counts in its estimated rate, the rest being like wards: (T/w)/(b + T/w).
 * Source: posterior mean of statistics, 4.7.
 *
 * @returns between 0 and 1; null where no rate is shared
 * @example ownShare({ rate: { a: 4, b: 30 } }, { exposureDays: 20 }, 2) // => 0.25
 */
export function ownShare(
  prior: { rate: { a: number; b: number } | null },
  own: { exposureDays: number },
  dispersion: number,
): number | null {
  if (prior.rate === null) return null
  const told = own.exposureDays / dispersion
  return told === 0 ? 0 : told / (prior.rate.b + told)
}

function categoryPrior(items: readonly (readonly PoolMember[])[]): PoolPrior | null {
  const telling = items.map((members) => members.filter(tellsDispersion)).filter((members) => members.length > 0)
  const members = telling.flat()
  const w0 = meanDispersion(members)
  if (telling.length < FEWEST_ITEMS || w0 === null) return null
  const wards = countWards(members)
  return { nu0: POOLED_FREEDOM, w0, rate: null, basis: 'category', members: members.length, wards }
}

const countWards = (members: readonly PoolMember[]): number => new Set(members.map(({ wardId }) => wardId)).size

const tellsDispersion = (member: PoolMember): boolean =>
  member.exposureDays > 0 && member.dispersion !== null && member.freedom >= 1

function meanDispersion(members: readonly PoolMember[]): number | null {
  let freedom = 0
  let sum = 0
  for (const member of members.filter(tellsDispersion)) {
    freedom += member.freedom
    sum += member.freedom * Math.max(SMALLEST_DISPERSION, member.dispersion!)
  }
  return freedom > 0 ? Math.max(1, sum / freedom) : null
}

function rateLaw(members: readonly PoolMember[], dispersion: number): { a: number; b: number } | null {
  const exposure = sumOf(members, ({ exposureDays }) => exposureDays)
  const mean = sumOf(members, ({ quantity }) => quantity) / exposure
  if (!(mean > 0)) return null
  const between = sumOf(members, (m) => m.exposureDays * (m.quantity / m.exposureDays - mean) ** 2)
  const unequal = exposure - sumOf(members, ({ exposureDays }) => exposureDays ** 2) / exposure
  const measured = (between - (members.length - 1) * dispersion * mean) / unequal
  const variance = Math.max(measured, mean * mean * SMALLEST_SPREAD)
  return { a: (mean * mean) / variance, b: mean / variance }
}

const sumOf = (members: readonly PoolMember[], of: (member: PoolMember) => number): number =>
  members.reduce((sum, member) => sum + of(member), 0)
