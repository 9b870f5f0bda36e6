/** How a unit is spoken of and counted. `code` is UN/ECE Recommendation 20. */
export const units = {
  each: { code: 'C62', note: 'Count each one. An opened box counts as what is left in it.' },
  pair: { code: 'PR', note: 'Count pairs. A torn packet does not count.' },
  roll: { code: 'RO', note: 'Count rolls. A roll in use does not count.' },
  box: { code: 'BX', note: 'Count boxes. An opened box counts as one.' },
  pack: { code: 'PK', note: 'Count packs. An opened pack counts as one.' },
  bag: { code: 'BG', note: 'Count bags. A bag without its wrap does not count.' },
  bottle: { code: 'BO', note: 'Count bottles. An opened bottle does not count.' },
  set: { code: 'SET', note: 'Count sets. A set with a broken seal does not count.' },
  tube: { code: 'TU', note: 'Count tubes. A tube in use does not count.' },
  tub: { code: 'TB', note: 'Count tubs. An opened tub counts as one.' },
} as const

/**
 * How an item is used in one room: units a day and the shape of its demand.
 * `steady` Poisson; `bursty` over-dispersed; `lumpy` rare and many at once; `weekday` little at weekends;
 * `stopped` used until some weeks ago, then no more.
 */
export type Shape = 'steady' | 'bursty' | 'lumpy' | 'weekday' | 'stopped'

/**
 * One item of the demo hospital, written on one line:
 * code, shelf name, full name, unit of use, order unit/units in it, class, supplier, price of one unit, shelf life in
 * days (0: none) and the places it stands in as `room units-a-day shape`, e.g. `A1 6 n, B1 4 p`.
 */
export type ItemRow = readonly [
  code: string,
  name: string,
  orderName: string,
  unit: keyof typeof units,
  pack: string,
  ved: 'V' | 'E' | 'D',
  supplier: 'CS' | 'FEN' | 'MAR' | 'TAR',
  price: number,
  shelfLifeDays: number,
  places: string,
]
