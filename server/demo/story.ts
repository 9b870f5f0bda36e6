/** One place of the demo hospital, by what stands there. */
export interface StoryPlace {
  /** Room code. */
  room: string
  /** Item code. */
  item: string
}

const places = (room: string, ...items: string[]): StoryPlace[] => items.map((item) => ({ room, item }))

/**
 * Places with a story, the same in every demo hospital: what a person shows when telling what Brimline does, and what
 * tests look for. How they come about: `ending.ts` (movements) and `catalogue-load.ts` (everything else).
 */
export const story = {
  /** Vital, found empty, its order more than two working days late … */
  emptyVital: { room: 'ALD-1', item: 'AW-012' },
  /** … while as many of the same item lie in the next ward. */
  nextDoor: { room: 'BIR-1', item: 'AW-012', onHand: 18 },
  /** Two bags that look alike, side by side. */
  lookalikes: places('ALD-1', 'FL-002', 'FL-010'),
  /** Its aim asks for more than the shelf can take. */
  smallShelf: { room: 'CED-1', item: 'FL-020', capacity: 60 },
  twiceAMonth: { room: 'ELD-1', item: 'VA-120' },
  /** Used rarely, and then many at once. */
  lumpy: { room: 'ELD-1', item: 'DR-070' },
  /** Its aim was set by a reviewer and is due for review this week. */
  reviewThisWeek: { room: 'CED-1', item: 'SY-050', level: 0.999 },
  /** A coordinator proposes a higher aim. */
  proposed: { room: 'ELD-1', item: 'MO-020', level: 0.999 },
  /** A hard minimum. */
  pinnedFloor: { room: 'HAZ-1', item: 'MO-021', floor: 2 },
  neverCounted: places('ALD-1', 'AW-013', 'FE-030', 'MO-060'),
  /** Places due now in the room that the ward's sign-in counts: the three never counted and nine with an old count. */
  due: { room: 'ALD-1', ward: 'ALD', places: 12 },
  oldCounts: places('ALD-1', 'UR-012', 'UR-014', 'UR-020', 'UR-031', 'UR-050', 'UR-051', 'UR-060', 'GL-003', 'HY-002'),
  /** One item in two places of a room: the second belongs to the first. */
  overflow: places('ALD-1', 'FL-001'),
  /** Six packs got wet and are held until somebody decides. */
  held: { room: 'BIR-1', item: 'SY-010', units: 6 },
  /** A delivery that was put on the shelf and never keyed. */
  neverKeyed: { room: 'BIR-1', item: 'DR-001' },
  /** Part of its order is here. */
  partReceived: places('ROW-1', 'TH-001', 'TH-003'),
  /** A working day or two late, still believed. */
  lateBelieved: { room: 'CED-1', item: 'FL-042' },
  /** A ward that moved: its counts begin anew, and like wards help. */
  moved: { room: 'POP-1', daysAgo: 24, by: '3012', reason: 'Poplar moved into the new wing, with other beds' },
  /** Changes people know of; days from the first start. */
  ahead: [
    {
      name: 'Second hip list',
      room: 'ROW-1',
      items: ['TH-001', 'TH-003'],
      kind: 'cases',
      unitsPerCase: 2,
      casesPerDay: 3,
      weekdays: '24',
      from: 12,
      to: 68,
      reason: 'Theatre 3 opens a second list on Tuesdays and Thursdays',
    },
    {
      name: 'New floor in Osier',
      room: 'OSI-1',
      items: [],
      kind: 'closed',
      unitsPerCase: null,
      casesPerDay: null,
      weekdays: '',
      from: 25,
      to: 34,
      reason: 'Patients lie in Linden and Maple meanwhile',
    },
  ],
} as const
