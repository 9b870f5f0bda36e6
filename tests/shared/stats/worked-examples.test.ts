import { describe, expect, it } from 'vitest'
import file from '#tests/fixtures/stats/worked_examples.json' with { type: 'json' }
import { gammaCdf } from '#shared/stats/gamma-cdf.ts'
import { gammaQuantile } from '#shared/stats/gamma-quantile.ts'
import { normalCdf } from '#shared/stats/normal-cdf.ts'
import { normalLoss } from '#shared/stats/normal-loss.ts'
import { normalQuantile } from '#shared/stats/normal-quantile.ts'
import { normalUpperTail } from '#shared/stats/normal-upper-tail.ts'
import { poissonCdf } from '#shared/stats/poisson-cdf.ts'
import { poissonLoss } from '#shared/stats/poisson-loss.ts'
import { poissonMass } from '#shared/stats/poisson-mass.ts'
import { poissonQuantile } from '#shared/stats/poisson-quantile.ts'
import { studentQuantile } from '#shared/stats/student-quantile.ts'

type Numbers = Record<string, number>

/** What our functions answer for the inputs of a published example, under the names of its outputs. */
const answer: Record<string, (q: Numbers) => Numbers> = {
  'normal quantile': (q) => ({ z: normalQuantile(q.p!), q: normalQuantile(q.p!, q.mean ?? 0, q.sd ?? 1) }),
  'normal CDF': (q) => ({ cdf: normalCdf(q.z!) }),
  'normal upper tail': (q) => ({ upper: normalUpperTail(q.z!) }),
  'Student t quantile': (q) => ({ t: studentQuantile(q.p!, q.df!) }),
  'Student t quantile, non-integer df': (q) => ({ t: studentQuantile(q.p!, q.df!) }),
  'gamma quantile': (q) => ({ q: gammaQuantile(q.p!, q.shape!, q.scale!) }),
  'gamma CDF': (q) => ({ cdf: gammaCdf(q.x!, q.shape!, q.scale!) }),
  'Poisson tail': (q) => ({ P_gt: 1 - poissonCdf(q.x!, q.lam!) }),
  'Poisson CDF': (q) => ({
    cdf: poissonCdf(q.x!, q.lam!),
    pmf: poissonMass(q.x!, q.lam!),
    sd: Math.sqrt(q.lam!),
  }),
  'Poisson pmf, CDF and loss': (q) => ({
    pmf: poissonMass(q.r!, q.lam!),
    cdf: poissonCdf(q.r!, q.lam!),
    loss: poissonLoss(q.r!, q.lam!),
  }),
  'normal loss table': (q) => ({ E: normalLoss(q.z!, 0, 1), csl: normalCdf(q.z!) }),
}

/** The printed tolerance: a number, or words that begin with `rel`. */
const allowed = (tolerance: number | string, value: number): number =>
  typeof tolerance === 'number' ? tolerance : Number(tolerance.replace('rel ', '')) * Math.abs(value)

describe('published table values and textbook examples', () => {
  const rows = file.rows.filter((row) => row.topic in answer)

  it('covers W01 to W45; W46 to W66 are policies, asserted there', () => {
    const ids = Array.from({ length: 45 }, (_, i) => `W${String(i + 1).padStart(2, '0')}`)
    expect([...rows.map(({ id }) => id), 'W41'].sort()).toEqual(ids)
  })

  for (const row of rows) {
    it(`${row.id} ${row.topic}: ${row.source}`, () => {
      const got = answer[row.topic]!(row.inputs as unknown as Numbers)
      for (const [name, value] of Object.entries(row.outputs as unknown as Numbers)) {
        expect(Math.abs(got[name]! - value), name).toBeLessThanOrEqual(allowed(row.tolerance, value))
      }
    })
  }

  it('W41 N(1000, 300), r = 1600: loss 2.55 by table (Cachon & Terwiesch p. 431)', () => {
    expect(Math.abs(normalLoss(1600, 1000, 300) - 2.55)).toBeLessThan(0.02)
    expect(Math.abs(normalLoss(2, 0, 1) - 0.0085)).toBeLessThan(5e-5)
  })

  it('W65: the normal quantile at 98 % is 2.053749, not the 2.054189 of the short formula (A&S 26.2.23, p. 933)', () => {
    expect(Math.abs(normalQuantile(0.98) - 2.053749)).toBeLessThan(5e-7)
  })

  it('W59 horse-kick deaths: Poisson with mean 0.61 has its 95 % quantile at 2 (von Bortkiewicz 1898)', () => {
    expect(poissonQuantile(0.95, 0.61)).toBe(2)
  })

  it('statistics table: G(k) at the usual service levels', () => {
    // Computed independently in R 4.2.2: k and G(k) rounded to five places.
    const table = [
      [0.9, 0.04734],
      [0.95, 0.02089],
      [0.98, 0.00734],
      [0.99, 0.00339],
      [0.995, 0.00158],
      [0.999, 0.00028],
    ] as const
    for (const [p, g] of table) expect(Math.abs(normalLoss(normalQuantile(p), 0, 1) - g)).toBeLessThan(6e-6)
  })
})
