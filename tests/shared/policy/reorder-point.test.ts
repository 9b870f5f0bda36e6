import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { PolicyInput } from '#shared/policy/policy-input.ts'
import { PolicyInputError } from '#shared/policy/policy-input-error.ts'
import { POLICY_WARNINGS } from '#shared/policy/policy-result.ts'
import { reorderPoint } from '#shared/policy/reorder-point.ts'

const week = (quantity: number, more: object = {}) => ({ days: 7, quantity, ...more })
const steady = [14, 9, 21, 12, 17, 8, 15, 19, 11, 13, 16, 10].map((quantity) => week(quantity))
const base: PolicyInput = { intervals: steady, leadTime: { meanDays: 3 }, reviewPeriodDays: 4, serviceLevel: 0.98 }

const failure = (input: unknown): PolicyInputError => {
  try {
    reorderPoint(input as PolicyInput)
  } catch (error) {
    if (error instanceof PolicyInputError) return error
    throw error
  }
  throw new Error('the input was accepted')
}

describe('which method answers', () => {
  it.each([
    [{}, 'negative-binomial-mixture'],
    [{ method: 'negative-binomial' }, 'negative-binomial-mixture'],
    [{ method: 'negative-binomial', estimate: 'plug-in' }, 'negative-binomial'],
    [{ method: 'normal' }, 'student'],
    [{ method: 'normal', estimate: 'plug-in' }, 'normal'],
    [{ method: 'poisson' }, 'gamma-poisson'],
    [{ method: 'poisson', estimate: 'plug-in' }, 'poisson'],
    [{ method: 'poisson', estimate: 'plug-in', leadTime: { meanDays: 3, sdDays: 1 } }, 'negative-binomial'],
    [{ method: 'gamma' }, 'gamma'],
    [{ method: 'lognormal' }, 'lognormal'],
    [{ intervals: [...steady, week(4.5)] }, 'student'],
    [{ intervals: [week(4.5)] }, 'negative-binomial-mixture'],
    [{ intervals: steady.map(({ quantity }) => week(quantity * 100)) }, 'student'],
    [{ intervals: null, demand: { meanPerDay: 6 } }, 'poisson'],
    [{ intervals: null, demand: { meanPerDay: 6, variancePerDay: 11 } }, 'negative-binomial'],
    [{ intervals: null, demand: { meanPerDay: 600, variancePerDay: 900 } }, 'normal'],
    [{ intervals: null, demand: { meanPerDay: 6 }, method: 'normal' }, 'normal'],
  ])('%j is answered by %s', (change, method) => {
    expect(reorderPoint({ ...base, ...change } as PolicyInput).method).toBe(method)
  })
})

describe('few and strange data', () => {
  it('answers the entered level when nothing was ever counted', () => {
    const got = reorderPoint({ ...base, intervals: [] })
    expect(got).toMatchObject({ method: 'entered', demand: null, reorderPoint: null, parLevel: null, achieved: null })
    expect(got.warnings).toContain('no-data')
  })

  it('keeps a pinned floor when nothing was ever counted', () => {
    const got = reorderPoint({ ...base, intervals: [], pinnedFloor: 12, order: { packSize: 10 } })
    expect(got).toMatchObject({ method: 'entered', reorderPoint: 12, orderQuantity: 10, parLevel: 22 })
    expect(got.warnings).toContain('floor')
  })

  it('keeps two units after six weeks without use, where a plug-in rule keeps none', () => {
    const none = { intervals: Array.from({ length: 6 }, () => week(0)), leadTime: { meanDays: 3 }, reviewPeriodDays: 7 }
    const got = reorderPoint({ ...none, serviceLevel: 0.98 })
    expect(got.reorderPoint).toBe(2)
    expect(got.warnings).toEqual(expect.arrayContaining(['all-zero', 'few-intervals']))
    expect(reorderPoint({ ...none, serviceLevel: 0.98, method: 'poisson', estimate: 'plug-in' }).reorderPoint).toBe(0)
    for (const method of ['normal', 'gamma', 'lognormal'] as const)
      expect(reorderPoint({ ...none, serviceLevel: 0.98, method }).reorderPoint).toBe(0)
  })

  it('gives no variance and no textbook figure from one interval', () => {
    const got = reorderPoint({ ...base, intervals: [week(9)] })
    expect(got.demand).toMatchObject({ intervals: 1, variancePerDay: null, dispersion: null, sufficient: false })
    expect(got.textbookNormal).toBeNull()
  })

  it('calls eight intervals over four weeks sufficient, one less or shorter not', () => {
    const sufficient = (count: number, days: number, censored = false) =>
      reorderPoint({
        ...base,
        intervals: Array.from({ length: count }, () => ({ days, quantity: 3, censored })),
        prior: { rate: { a: 1, b: 1 } },
      }).demand!.sufficient
    expect(sufficient(8, 3.5)).toBe(true)
    expect(sufficient(7, 7)).toBe(false)
    expect(sufficient(8, 3)).toBe(false)
    expect(sufficient(8, 7, true)).toBe(false)
  })

  it('has nothing to say when every interval ended empty, unless a pool stands in', () => {
    const intervals = steady.map((interval) => ({ ...interval, censored: true }))
    const alone = reorderPoint({ ...base, intervals })
    expect(alone).toMatchObject({ method: 'entered', reorderPoint: null })
    expect(alone.warnings).toContain('all-censored')
    expect(alone.demand!.meanPerDay).toBeCloseTo(165 / 84, 10)
    for (const method of ['auto', 'poisson'] as const) {
      const pooled = reorderPoint({ ...base, method, intervals, prior: { nu0: 8, w0: 1.5, rate: { a: 4, b: 2 } } })
      expect(pooled.reorderPoint).toBeGreaterThan(reorderPoint({ ...base, method }).reorderPoint!)
      expect(pooled.warnings).toEqual(expect.arrayContaining(['pooled', 'all-censored']))
    }
  })

  it('reads an interval that ended empty as "at least"', () => {
    const intervals = steady.map((interval, i) => ({ ...interval, censored: i % 3 === 0 }))
    for (const method of ['auto', 'poisson', 'negative-binomial', 'normal'] as const)
      for (const estimate of ['plug-in', 'predictive'] as const) {
        const got = reorderPoint({ ...base, intervals, method, estimate })
        expect(got.demand!.meanPerDay).toBeGreaterThan(165 / 84)
        expect(got.demand!.censoredIntervals).toBe(4)
      }
  })

  it('leaves an interval of weight 0 out and counts it as excluded', () => {
    const got = reorderPoint({ ...base, intervals: [week(900, { weight: 0 }), ...steady] })
    const plain = reorderPoint(base)
    expect(got).toEqual({ ...plain, demand: { ...plain.demand, excludedIntervals: 1 } })
  })

  it('covers a lead time of no days with nothing', () => {
    expect(reorderPoint({ ...base, leadTime: { meanDays: 0 }, reviewPeriodDays: 0 }).reorderPoint).toBe(0)
  })
})

describe('before the first count', () => {
  const prior = { nu0: 8, w0: 3, rate: { a: 6, b: 12 } }
  const start = { ...base, intervals: [], prior }

  it('starts from like wards', () => {
    const got = reorderPoint(start)
    expect(got).toMatchObject({ method: 'negative-binomial-mixture', textbookNormal: null })
    expect(got.demand).toEqual({
      ...{ meanPerDay: 0.5, variancePerDay: null, dispersion: null, intervals: 0, days: 0 },
      ...{ censoredIntervals: 0, excludedIntervals: 0, sufficient: false },
    })
    // P a/b = 7 x 6/12 and, at w0, the ratio w0 + P/b.
    expect(got.protectionDemand!.mean).toBeCloseTo(3.5, 12)
    expect(got.protectionDemand!.variance).toBeCloseTo(3.5 * (3 + 7 / 12), 12)
    expect(got.warnings).toEqual(['few-intervals', 'pooled', 'stated-lead-time'])
    expect(got.explanation).toContainEqual({
      label: 'Where the figures come from',
      formula: 'your counts weigh 0 %, like wards (0.5 a day) 100 %',
      value: '0.5 a day',
    })
    expect(reorderPoint({ ...start, method: 'negative-binomial' })).toEqual(got)
  })

  it('is a negative binomial where the dispersion is known: gamma rates of Poisson use (statistics, 4.4)', () => {
    // With w = 1 throughout, D ~ NB(size a, probability b/(b + P)); SciPy 1.17.1: nbinom.ppf(0.98, 6, 12/19) = 9.
    const got = reorderPoint({ ...start, prior: { ...prior, nu0: 1e6, w0: 0.5 } })
    expect(got.reorderPoint).toBe(9)
    expect(got.achieved).toBeCloseTo(0.9815877, 7)
  })

  it('comes close to a first count of next to nothing', () => {
    const glimpse = reorderPoint({ ...start, intervals: [{ days: 1e-6, quantity: 0 }] })
    expect(glimpse.reorderPoint).toBe(reorderPoint(start).reorderPoint)
    expect(glimpse.achieved).toBeCloseTo(reorderPoint(start).achieved!, 5)
  })

  it('stays with the entered level where like wards tell no rate, or were never counted', () => {
    for (const rate of [null, { a: 0.5, b: 0 }])
      expect(reorderPoint({ ...start, prior: { ...prior, rate } })).toMatchObject({ method: 'entered', demand: null })
  })

  it('says how much the first counts weigh: (T/w)/(b + T/w), 7 days against 12 at w = 3', () => {
    const rows = reorderPoint({ ...start, intervals: [week(9)] }).explanation
    expect(rows.find(({ label }) => label === 'Where the figures come from')!.formula).toContain('weigh 16 %')
  })
})

describe('floor, shelf and order quantity', () => {
  const known = (more: Partial<PolicyInput>) =>
    reorderPoint({
      demand: { meanPerDay: 10 },
      leadTime: { meanDays: 3, observedDays: [3] },
      reviewPeriodDays: 1,
      serviceLevel: 0.98,
      ...more,
    })
  // Poisson(40), 98 %: 53 (R 4.2.2 qpois).
  it('cuts at one pack below the shelf and says so', () => {
    const got = known({ capacity: 60, order: { packSize: 20 } })
    expect(got).toMatchObject({ computedReorderPoint: 53, reorderPoint: 40, orderQuantity: 20, parLevel: 60 })
    expect(got.warnings).toEqual(['shelf-cannot-hold'])
    expect(got.achieved).toBeLessThan(0.98)
  })
  it('puts a pinned floor above the cut', () => {
    const got = known({ capacity: 60, order: { packSize: 20 }, pinnedFloor: 55 })
    expect(got).toMatchObject({ reorderPoint: 55, orderQuantity: 20 })
    expect(got.warnings).toEqual(['shelf-cannot-hold', 'floor'])
  })
  it('does not warn of a floor that changes nothing', () => {
    expect(known({ pinnedFloor: 53 }).warnings).toEqual([])
  })
  it('orders the fewest packs that cover a review period, at least one', () => {
    expect(known({ order: { packSize: 4 } }).orderQuantity).toBe(12)
    expect(known({ reviewPeriodDays: 0, order: { packSize: 4 } }).orderQuantity).toBe(4)
  })
  it('orders in economic packs when the costs are known', () => {
    // n(n + 1) 50^2 >= 2 x 3650 x 10 / 0.6 = 121,667 gives n = 7 (7 x 8 = 56 >= 48.7; 6 x 7 = 42 is less).
    const order = { packSize: 50, orderingCost: 10, unitCost: 3, holdingRatePerYear: 0.2 }
    expect(known({ order }).orderQuantity).toBe(350)
    expect(known({ order: { ...order, holdingRatePerYear: undefined } }).orderQuantity).toBe(350)
  })
  it('takes the given quantity before anything else', () => {
    expect(known({ order: { packSize: 50, quantity: 70, orderingCost: 10, unitCost: 3 } }).orderQuantity).toBe(70)
  })
  it('raises to the minimum, then fits the shelf, and says both', () => {
    const raised = known({ order: { packSize: 4, minimum: 50 } })
    expect(raised.orderQuantity).toBe(52)
    expect(raised.warnings).toEqual(['minimum-order'])
    const cut = known({ order: { packSize: 4, minimum: 50 }, capacity: 80 })
    expect(cut.orderQuantity).toBe(24)
    expect(cut.warnings).toEqual(['minimum-order'])
  })
  it('orders no more than is used before its date', () => {
    // Poisson(100): the largest y with P(D >= y) >= 0.95 is 84 (R 4.2.2 qpois(0.05, 100) = 84).
    const got = known({ shelfLifeDays: 10, order: { packSize: 10, quantity: 90 } })
    expect(got.orderQuantity).toBe(30)
    expect(got.warnings).toEqual(['expiry-cap'])
    expect(known({ shelfLifeDays: 300, order: { packSize: 10, quantity: 90 } }).warnings).toEqual([])
  })
})

describe('lead times, wastage and activity', () => {
  it('averages over the lead times seen: rare long delays count for more than mean and spread', () => {
    // Poisson 10 a day, 1 day in nine of ten deliveries, 7 in the tenth: promised 95 % needs 70, the normal says 47.
    const observedDays = [1, 1, 1, 1, 1, 1, 1, 1, 1, 7]
    const input = { demand: { meanPerDay: 10 }, serviceLevel: 0.95 }
    const mixed = reorderPoint({ ...input, leadTime: { meanDays: 1.6, sdDays: 1.8, observedDays } })
    expect(mixed.reorderPoint).toBe(70)
    expect(mixed.achieved).toBeCloseTo(0.953, 3)
    expect(mixed.textbookNormal!.reorderPoint).toBe(47)
    expect(mixed.textbookNormal!.achieved).toBeCloseTo(0.9, 2)
    expect(mixed.warnings).not.toContain('stated-lead-time')
  })
  it('adds wastage above 2 % of use to the mean, and forgets less', () => {
    const mean = (wastagePerDay: number, method: PolicyInput['method'] = 'auto') =>
      reorderPoint({ ...base, method, wastagePerDay }).protectionDemand!.mean
    for (const method of ['auto', 'normal', 'poisson', 'gamma'] as const) {
      expect(mean(0.5, method) - mean(0, method)).toBeCloseTo(3.5, 9)
      expect(mean(0.03, method)).toBe(mean(0, method))
    }
  })
  it('weighs the days ahead by their activity', () => {
    const doubled = reorderPoint({ ...base, protectionExposureDays: 14 })
    expect(doubled.protectionDemand!.mean).toBeCloseTo(2 * reorderPoint(base).protectionDemand!.mean, 9)
    expect(doubled).toMatchObject({ protectionDays: 7, warnings: expect.arrayContaining(['planned-change']) })
  })
})

describe('patterns', () => {
  const warningsOf = (quantities: number[]) =>
    reorderPoint({ ...base, intervals: quantities.map((q) => week(q)) }).warnings
  it('tells lumpy use', () => {
    expect(warningsOf([0, 0, 40, 0, 0, 0, 3, 0, 0, 1])).toContain('lumpy')
    expect(warningsOf(steady.map(({ quantity }) => quantity))).not.toContain('lumpy')
  })
  it('tells a trend, not a wobble', () => {
    expect(warningsOf([2, 3, 4, 5, 7, 8, 10, 11, 13, 16, 18, 21])).toContain('trend')
    expect(warningsOf(steady.map(({ quantity }) => quantity))).not.toContain('trend')
  })
  it('tells use that comes in runs', () => {
    expect(warningsOf([20, 21, 19, 20, 22, 21, 3, 2, 3, 2, 4, 3, 20, 19, 21, 20, 22, 19])).toContain('autocorrelated')
    expect(warningsOf(steady.map(({ quantity }) => quantity))).not.toContain('autocorrelated')
  })
})

describe('bad input names the field', () => {
  const daily = Array.from({ length: 30 }, (_, i) => ({ days: 1, quantity: i % 3 }))
  it.each([
    ['no object', 7, ''],
    ['nothing to learn from', { ...base, intervals: undefined }, '/intervals'],
    ['both ways at once', { ...base, demand: { meanPerDay: 3 } }, '/demand'],
    ['no lead time', { ...base, leadTime: undefined }, '/leadTime'],
    ['no mean lead time', { ...base, leadTime: {} }, '/leadTime/meanDays'],
    ['negative lead time', { ...base, leadTime: { meanDays: -1 } }, '/leadTime/meanDays'],
    ['negative days', { ...base, intervals: [...steady, { days: -3, quantity: 4 }] }, '/intervals/12/days'],
    ['no days', { ...base, intervals: [{ days: 0, quantity: 4 }] }, '/intervals/0/days'],
    ['not a number', { ...base, intervals: [{ days: 3, quantity: Number.NaN }] }, '/intervals/0/quantity'],
    ['infinite', { ...base, leadTime: { meanDays: Infinity } }, '/leadTime/meanDays'],
    ['a number in quotes', { ...base, serviceLevel: '0.98' }, '/serviceLevel'],
    ['certainty', { ...base, serviceLevel: 1 }, '/serviceLevel'],
    ['below a half', { ...base, serviceLevel: 0.49 }, '/serviceLevel'],
    ['no service level', { ...base, serviceLevel: undefined }, '/serviceLevel'],
    ['an unknown field', { ...base, servicelevel: 0.98 }, '/servicelevel'],
    ['an unknown field within', { ...base, leadTime: { meanDays: 3, 'a/b': 1 } }, '/leadTime/a~1b'],
    ['an unknown method', { ...base, method: 'croston' }, '/method'],
    ['a negative weight', { ...base, intervals: [week(3, { weight: -1 })] }, '/intervals/0/weight'],
    ['half a pack', { ...base, order: { packSize: 0.5 } }, '/order/packSize'],
    ['a fractional floor', { ...base, pinnedFloor: 2.5 }, '/pinnedFloor'],
    [
      'a spread around nothing',
      { ...base, leadTime: { meanDays: 0, sdDays: 1 }, reviewPeriodDays: 0 },
      '/leadTime/meanDays',
    ],
    ['one interval, normal', { ...base, intervals: [week(3)], method: 'normal' }, '/intervals'],
    ['one interval, gamma', { ...base, intervals: [week(3)], method: 'gamma' }, '/intervals'],
    ['one interval, lognormal', { ...base, intervals: [week(3)], method: 'lognormal' }, '/intervals'],
    [
      'one interval, plug-in',
      { ...base, intervals: [week(3)], method: 'negative-binomial', estimate: 'plug-in' },
      '/intervals',
    ],
    ['no interval, normal', { ...base, intervals: [], method: 'normal' }, '/intervals'],
    [
      'one whole interval, normal',
      { ...base, intervals: [week(3), week(4, { censored: true })], method: 'normal' },
      '/intervals',
    ],
    ['fill without a quantity', { ...base, serviceMeasure: 'fill' }, '/order/quantity'],
    [
      'fill of a predictive t',
      { ...base, method: 'normal', serviceMeasure: 'fill', order: { quantity: 9 } },
      '/serviceMeasure',
    ],
    [
      'fill of a gamma-Poisson',
      { ...base, method: 'poisson', serviceMeasure: 'fill', order: { quantity: 9 } },
      '/serviceMeasure',
    ],
    ['weekly records resampled', { ...base, method: 'bootstrap' }, '/intervals/0/days'],
    ['weekly records in windows', { ...base, method: 'empirical' }, '/intervals/0/days'],
    ['parameters resampled', { ...base, intervals: null, demand: { meanPerDay: 3 }, method: 'bootstrap' }, '/method'],
    [
      'a spread with windows',
      { ...base, intervals: daily, method: 'empirical', leadTime: { meanDays: 3, sdDays: 1 } },
      '/leadTime/sdDays',
    ],
    ['fewer days than to cover', { ...base, intervals: daily.slice(0, 6), method: 'empirical' }, '/intervals'],
    [
      'a negative day resampled',
      { ...base, intervals: [{ days: 1, quantity: -1 }], method: 'bootstrap' },
      '/intervals/0/quantity',
    ],
    [
      'an empty day resampled',
      { ...base, intervals: [{ days: 1, quantity: 1, censored: true }], method: 'bootstrap' },
      '/intervals/0/censored',
    ],
    [
      'endless resampling',
      {
        ...base,
        intervals: [
          { days: 1, quantity: 1e6 },
          { days: 1, quantity: 1 },
        ],
        method: 'bootstrap',
      },
      '/method',
    ],
    [
      'weights that leave next to nothing',
      { ...base, intervals: [week(1e9, { weight: 1e6 }), week(0), week(3)], method: 'normal', serviceLevel: 0.9 },
      '/intervals',
    ],
    ['more returned than used, gamma', { ...base, intervals: [week(-5), week(2)], method: 'gamma' }, '/method'],
  ])('%s', (_, input, pointer) => {
    const error = failure(input)
    expect(error.pointer).toBe(pointer)
    expect(error.detail.length).toBeGreaterThan(10)
  })

  it('names every bad field at once', () => {
    const error = failure({ ...base, serviceLevel: 2, capacity: -1, colour: 'red' })
    expect(error.errors.map(({ pointer }) => pointer).sort()).toEqual(['/capacity', '/colour', '/serviceLevel'])
  })
})

const interval = fc.record({
  days: fc.double({ min: 0.5, max: 30, noNaN: true }),
  quantity: fc.integer({ min: -3, max: 60 }),
  censored: fc.boolean(),
})
const history = fc
  .array(interval, { minLength: 1, maxLength: 25 })
  .map((intervals) =>
    intervals.map((entry, i) => ({ ...entry, censored: entry.censored && i > 0 && entry.quantity > 0 })),
  )
const level = fc.double({ min: 0.5, max: 0.9999, noNaN: true })
const days = fc.double({ min: 0.25, max: 20, noNaN: true })
const sd = fc.double({ min: 0, max: 3, noNaN: true })

describe('properties of the recommended method', () => {
  it('answers the smallest level that reaches the aim', () => {
    fc.assert(
      fc.property(history, level, days, sd, (intervals, serviceLevel, meanDays, sdDays) => {
        const input = { intervals, serviceLevel, leadTime: { meanDays, sdDays } }
        const got = reorderPoint(input)
        expect(got.achieved).toBeGreaterThanOrEqual(serviceLevel * (1 - 1e-13))
        if (got.reorderPoint! > 0) {
          const below = reorderPoint({ ...input, capacity: got.reorderPoint!, order: { packSize: 1 } })
          expect(below.reorderPoint).toBe(got.reorderPoint! - 1)
          expect(below.achieved).toBeLessThan(serviceLevel)
        }
      }),
      { numRuns: 60 },
    )
  })
  it('never falls when the aim or the time to cover rises', () => {
    fc.assert(
      fc.property(history, level, level, days, days, (intervals, p1, p2, d1, d2) => {
        const of = (serviceLevel: number, meanDays: number) =>
          reorderPoint({ intervals, serviceLevel, leadTime: { meanDays } }).reorderPoint!
        const [low, high] = [Math.min(p1, p2), Math.max(p1, p2)]
        expect(of(low, d1)).toBeLessThanOrEqual(of(high, d1))
        expect(of(low, Math.min(d1, d2))).toBeLessThanOrEqual(of(low, Math.max(d1, d2)))
      }),
      { numRuns: 60 },
    )
  })
  it('depends on neither the order of intervals nor the scale of weights, and survives being stored', () => {
    fc.assert(
      fc.property(
        history.map((entries) => entries.map((entry) => ({ ...entry, censored: false }))),
        level,
        days,
        fc.double({ min: 0.1, max: 9, noNaN: true }),
        (intervals, serviceLevel, meanDays, scale) => {
          const input = { intervals, serviceLevel, leadTime: { meanDays } }
          const got = reorderPoint(input)
          expect(reorderPoint(JSON.parse(JSON.stringify(input)) as PolicyInput)).toEqual(got)
          const reversed = reorderPoint({ ...input, intervals: [...intervals].reverse() })
          expect(reversed.achieved).toBeCloseTo(got.achieved!, 9)
          const scaled = reorderPoint({ ...input, intervals: intervals.map((entry) => ({ ...entry, weight: scale })) })
          expect(scaled.protectionDemand!.variance / got.protectionDemand!.variance).toBeCloseTo(1, 9)
        },
      ),
      { numRuns: 60 },
    )
  })
  it('keeps its parts together', () => {
    fc.assert(
      fc.property(
        history,
        level,
        days,
        fc.integer({ min: 1, max: 20 }),
        fc.option(fc.integer({ min: 1, max: 90 })),
        (intervals, serviceLevel, meanDays, packSize, pinnedFloor) => {
          const got = reorderPoint({
            intervals,
            serviceLevel,
            leadTime: { meanDays },
            order: { packSize },
            capacity: 80,
            pinnedFloor,
          })
          expect(got.parLevel).toBe(got.reorderPoint! + got.orderQuantity!)
          expect(got.orderQuantity! % packSize).toBe(0)
          expect(got.safetyStock).toBe(got.reorderPoint! - got.protectionDemand!.mean)
          expect(got.reorderPoint).toBe(Math.max(pinnedFloor ?? 0, Math.min(got.computedReorderPoint!, 80 - packSize)))
          expect(got.warnings).toEqual(POLICY_WARNINGS.filter((warning) => got.warnings.includes(warning)))
          for (const row of got.explanation)
            expect(Object.values(row).join(' ')).not.toMatch(/NaN|undefined|null|Infinity/)
        },
      ),
      { numRuns: 80 },
    )
  })
})
