import { negativeBinomialMass } from '#shared/stats/negative-binomial-mass.ts'

interface Seen {
  days: number
  quantity: number
}

/**
 * The negative binomial (variance-to-mean ratio w, additive in time) most likely to have given some counts: the one
 * reference figure the product itself does not work out, found here by golden sections over our masses.
 * Source: statistics, 4.3.
 */
export function likeliestNegativeBinomial(seen: readonly Seen[]): {
  meanPerDay: number
  ratio: number
  logLikelihood: number
} {
  const times = new Map<string, number>()
  for (const { days, quantity } of seen) times.set(`${days} ${quantity}`, (times.get(`${days} ${quantity}`) ?? 0) + 1)
  const kinds = [...times].map(([key, count]) => [...key.split(' ').map(Number), count] as [number, number, number])
  const logLikelihood = (mean: number, ratio: number): number =>
    kinds.reduce((sum, [days, quantity, count]) => {
      return sum + count * Math.log(negativeBinomialMass(quantity, (mean * days) / (ratio - 1), 1 / ratio))
    }, 0)
  const units = seen.reduce((sum, { quantity }) => sum + quantity, 0)
  const plain = units / seen.reduce((sum, { days }) => sum + days, 0)
  const meanAt = (ratio: number): number => highest((mean) => logLikelihood(mean, ratio), plain / 2, plain * 2)
  const ratio = highest((w) => logLikelihood(meanAt(w), w), 1.001, 20)
  const meanPerDay = meanAt(ratio)
  return { meanPerDay, ratio, logLikelihood: logLikelihood(meanPerDay, ratio) }
}

/** Where a function with one peak is highest, to 1e-7. */
function highest(of: (x: number) => number, from: number, to: number): number {
  const golden = (Math.sqrt(5) - 1) / 2
  let [low, high] = [from, to]
  let [left, right] = [high - golden * (high - low), low + golden * (high - low)]
  let [atLeft, atRight] = [of(left), of(right)]
  while (high - low > 1e-7) {
    if (atLeft > atRight) {
      ;[high, right, atRight] = [right, left, atLeft]
      left = high - golden * (high - low)
      atLeft = of(left)
    } else {
      ;[low, left, atLeft] = [left, right, atRight]
      right = low + golden * (high - low)
      atRight = of(right)
    }
  }
  return (low + high) / 2
}
