import type { SnapshotItem } from '#shared/contracts/counts.ts'
import type { CountQuestion } from '#shared/counts/unusual-count.ts'
import { counted, dueOn, duration, plural, quantity } from './format.ts'

/** Words of counting: the round, the questions, what a scan meant, and what waits on this phone. */
const ago = (days: number): string => (days <= 0 ? 'today' : days === 1 ? 'yesterday' : `${quantity(days)} days ago`)
const places = (n: number): string => counted(n, 'place')

/** "count boxes; 1 box = 25 each". */
function howToCount(item: SnapshotItem): string {
  const what = `count ${plural(item.countUnit)}`
  const pack = item.packSize > 1 ? `; 1 ${item.orderUnit} = ${counted(item.packSize, item.unitOfUse)}` : ''
  return what + pack
}

export const countWords = {
  title: 'Count',
  progress: (at: number, of: number): string => `${quantity(at)} of ${quantity(of)}`,
  onThisPhone: (n: number): string => `${quantity(n)} on this phone`,
  leave: 'Leave the round; it is kept',
  list: 'List',
  toList: 'Walk the shelf order instead of scanning',
  camera: 'Scan',
  toCamera: 'Scan the labels instead of walking the list',
  howToCount,
  lastCount: 'Last count',
  lastAgo: (days: number): string => `, ${ago(days)}`,
  never: 'Never counted',
  hidden: 'The last count shows once you type.',
  counted: (n: number): string => `${quantity(n)} counted`,
  last: (n: number): string => `last ${quantity(n)}`,
  number: 'Number counted',
  nothingTyped: 'no number yet',
  packs: 'Enter packs and loose',
  packsTitle: 'Packs and loose',
  packsOf: (unit: string, size: number, each: string): string => `${plural(unit)} of ${quantity(size)} ${each}`,
  loose: (unit: string): string => `loose ${unit}`,
  packsUse: (n: number, unit: string): string => `Use ${quantity(n)} ${unit}`,
  erase: 'Delete the last digit',
  minus: 'One less',
  plus: 'One more',
  sameAsLast: 'Same as last',
  save: 'Save and next',
  skip: 'Skip this place',
  undo: 'Undo',
  undoWhat: (display: string, n: number): string => `${display}: ${quantity(n)}`,
  takenBack: (display: string, n: number): string => `${display}: ${quantity(n)} is taken back.`,
  saved: (name: string, n: number, unit: string): string => `${name}: ${quantity(n)} ${unit} saved on this phone.`,
  notSaved: 'Not saved. This phone could not keep the number.',
  notSavedWhat:
    'The number is still here. Try again; if it stays, write it down, close other apps or free some space on the phone.',
  copy: 'Copy the number',
  copied: 'Copied.',
  tryAgain: 'Try again',
  listOf: 'Places in walking order',
  allPlaces: 'All places',
  done: 'counted',
  place: (bay: string, shelf: string): string =>
    [bay && `Bay ${bay}`, shelf && `shelf ${shelf}`].filter(Boolean).join(' · '),
  unknownPlace: 'Place not known on this phone',
  unknownPlaceWhat: (display: string): string =>
    `${display} is kept with your number. When it is sent, the record finds the place, or your coordinator is asked.`,
  backToRound: 'Back to the round',
  asOf: (when: string): string => `As of ${when}`,
} as const

export const scanWords = {
  window: 'Camera window',
  aim: 'Hold a label in the frame.',
  start: 'Scan with the camera',
  again: 'Start the camera again',
  starting: 'The camera is starting …',
  torchOn: 'Torch on',
  torchOff: 'Torch off',
  torch: 'Torch',
  typeCode: 'Type the code',
  typeTitle: 'Type the code on the label',
  typeHint: 'It begins with U, as U7K2-M4Q9. Small letters, spaces and hyphens do not matter.',
  typeLabel: 'Code',
  typeGo: 'Go to this place',
  mistyped: 'One character is wrong. Look at the label once more: its last character tells.',
  typeForm: 'A shelf code is U and seven more characters.',
  state: {
    refused: 'The camera is not allowed. Allow it in the browser’s settings for this page, or type the code.',
    none: 'This device has no camera. Type the code, use a scanner, or walk the list.',
    busy: 'Another app holds the camera. Close it and start again.',
    insecure: 'The camera needs an address that begins with https. Type the code, or walk the list.',
    failed: 'The camera stopped. Start it again, or type the code.',
    resting: 'The camera rests to spare the battery.',
  },
  misread: 'Misread. Scan again.',
  misprinted: 'Read wrong three times: the label seems to be printed wrong. Type the code printed beside it.',
  twoProducts: 'Two products in one code. Scan the shelf label.',
  person: 'This is a person’s code. Nothing was kept. Scan the shelf label.',
  delivery: 'A delivery label, not an item. Scan the shelf label.',
  notAPlace: 'This code is not a shelf label we know. Scan the shelf label, or type its code.',
  noPlaceForItem: 'No place in this room holds this item. Scan the shelf label.',
  severalPlaces: (n: number): string => `${places(n)} of this room hold this item; this is the next of them.`,
  unknown: (display: string): string => `No place with the code ${display} is known on this phone.`,
  countAnyway: 'Count it anyway',
  anotherRoom: 'another room',
  otherRoom: (display: string, room: string): string => `${display} stands in ${room}.`,
  goThere: 'Go to that room',
  stay: 'Stay here',
  found: (name: string): string => `Found: ${name}`,
} as const

function askTitle(question: CountQuestion, unit: string, display: string): string {
  switch (question.kind) {
    case 'tenfold':
      return `${quantity(question.instead)} ${unit} or ${quantity(question.keep)}?`
    case 'first-zero':
      return 'None left?'
    case 'rise':
      return 'Was a delivery put away?'
    case 'over-capacity':
      return `${quantity(question.keep)} in a place for ${quantity(question.capacity)}?`
    case 'outside-usual':
      return `Only ${quantity(question.keep)} ${unit} in ${display}?`
  }
}

export const questionWords = {
  title: askTitle,
  last: (n: number, days: number): string => `Last count ${quantity(n)}, ${ago(days)}.`,
  usual: (from: number, to: number): string =>
    from === to
      ? `With no delivery since, ${quantity(from)} would be usual.`
      : `With no delivery since, ${quantity(from)} to ${quantity(to)} would be usual.`,
  was: (n: number): string => `It was ${quantity(n)}`,
  keep: (n: number): string => `Keep ${quantity(n)}`,
  back: 'Back to the number',
  noneLeft: 'None left',
  zero: 'An empty place is reported at once: the coordinator sees it first in the list.',
  zeroVital: 'None counted here. Do not wait for this program: use your facility’s emergency supply route now.',
  rise: (from: number, to: number): string =>
    `The record expects ${quantity(from)}; you counted ${quantity(to)}. If a delivery was put away, saying so keeps the record of use right.`,
  putAway: (units: number, order: string): string => `Yes, ${quantity(units)} from order ${order}`,
  putAwayAll: (units: number): string => `Yes, ${quantity(units)} from the open orders`,
  lineDue: (units: number, date: string | null, today: string): string =>
    `${quantity(units)} on order${date ? `, due ${dueOn(date, today)}` : ''}`,
  noLines: 'No order is open for this place.',
  noDelivery: (n: number): string => `No, keep ${quantity(n)}`,
  capacity: 'The place is noted as smaller. Keep the number if it is right; the coordinator can change the size.',
  outside: 'That is fewer than use since the last count would explain.',
} as const

export const roundWords = {
  choose: 'Choose a room',
  due: (n: number): string => (n === 0 ? 'nothing due' : `${places(n)} due`),
  minutes: (n: number): string => `${quantity(n)} ${n === 1 ? 'minute' : 'minutes'}`,
  begin: (n: number, minutes: number): string =>
    `${places(n)}, ${quantity(minutes)} ${minutes === 1 ? 'minute' : 'minutes'}`,
  all: (n: number): string => `Count all ${places(n)}`,
  allShort: (n: number): string => `All ${quantity(n)}`,
  goOn: (done: number, of: number): string => `Go on: ${quantity(done)} of ${quantity(of)} counted`,
  startOver: 'Start over',
  notKept: 'not on this phone yet',
  keptAt: (when: string): string => `as of ${when}`,
  noRooms: 'No room is on this phone yet',
  noRoomsWhat: 'Open this page once with a connection. From then on counting works without one.',
  noneYours: 'No room is yours yet',
  noneYoursWhat: (editor: boolean): string =>
    editor
      ? 'Add a ward, then a room in it, under Hospital. A person sees a room once it is among their rooms.'
      : 'Ask your coordinator or administrator: they add a room to you under Hospital, People.',
  noRoom: 'This room is not on this phone yet',
  noRoomWhat: 'It is fetched as soon as there is a connection. From then on counting works without one.',
  empty: 'Nothing to count here',
  emptyWhat: 'No place of this room holds an item yet. Places are added under Hospital.',
  through: (n: number, minutes: number): string =>
    `${places(n)}, ${quantity(minutes)} ${minutes === 1 ? 'minute' : 'minutes'}`,
  found: (n: number): string => `${quantity(n)} would have run out.`,
  foundHint: (n: number): string =>
    n === 1
      ? 'It stands below its reorder point, and the record did not know.'
      : 'They stand below their reorder point, and the record did not know.',
  foundNone: 'The record knew of every place that is low.',
  sentAll: 'All of it is in the record.',
  sentSome: (n: number): string => `${quantity(n)} on this phone; sent as soon as there is a connection.`,
  sendNow: 'Send now',
  toToday: 'To Today',
  countMore: 'Count the rest of the room',
} as const

export const reasonWords = {
  'never-counted': 'never counted',
  'count-first': 'count first',
  'count-overdue': 'count is old',
  'daily-below': 'due daily while below',
} as const

export const attentionWords = {
  title: 'On this phone',
  lead: (n: number): string =>
    n === 0 ? 'Everything is in the record.' : `${counted(n, 'entry', 'entries')} not in the record yet`,
  needs: 'Needs attention',
  waiting: 'Waits to be sent',
  recent: 'In the record',
  others: 'Other people on this phone',
  othersWhat: (n: number, initials: string): string => `${counted(n, 'unsent entry', 'unsent entries')} by ${initials}`,
  othersHint: 'They are sent when that person signs in here again. Nobody else can open or change them.',
  kind: {
    count: 'counted',
    'count.correct': 'corrected to',
    'count.withdraw': 'count taken back',
    'movement.withdraw': 'entry taken back',
    receipt: 'put away',
    arrival: 'arrived',
    transfer: 'moved',
    wastage: 'thrown away',
    take: 'taken',
    hold: 'put on hold',
    release: 'freed from hold',
    signal: 'front bin empty',
    flag: 'flagged',
  } as Record<string, string>,
  fix: 'Fix',
  again: 'Send again',
  discard: 'Discard',
  export: 'Export',
  exportWhat: 'Saves these entries as a file, for your coordinator or for help.',
  fixTitle: 'Count it again',
  fixWhat: 'The entry is replaced by a new one with this number.',
  fixSave: 'Save the new number',
  discardTitle: 'Discard this entry?',
  discardWhat: 'It will not reach the record. Say why, for your own list.',
  discardReason: 'Reason',
  discardYes: 'Discard it',
  keep: 'Keep it',
  reasonMissing: 'Say why in a few words.',
  noReason: 'The record did not say why.',
  states: {
    sending: 'being sent',
    queued: 'on this phone',
    acked: 'in the record',
    attention: 'needs attention',
    discarded: 'discarded',
  },
  flags: {
    'count-differs': 'differs from another count nearby in time; a recount is asked for',
    'near-movement': 'close to a delivery or a take; look at the place once more',
    'clock-suspect': 'this phone’s clock seems wrong',
    'item-changed': 'the place holds another item now; the count went to the old one',
    'below-zero': 'more was taken than was there by the record',
    'rise-unexplained': 'rose without a delivery in the record',
  } as Record<string, string>,
  sync: {
    idle: '',
    sending: 'Sending …',
    done: '',
    wait: 'No connection, or the record is busy. It is tried again by itself.',
    portal: 'This network wants a sign-in of its own. Open it in the browser, then come back.',
    'signed-out': (n: number): string => `Sign in again to send ${counted(n, 'entry', 'entries')}.`,
    'other-person': 'Another person is signed in on the server. Sign in again as yourself; nothing is lost.',
    update: 'This version is too old to send. Update it; nothing is lost.',
  },
  signIn: 'Sign in again',
  old: (age: string): string => `Not sent for ${age}. Connect this phone, or tell your coordinator.`,
  age: (ms: number): string => duration(ms / 60_000),
  unprotected:
    'This browser may clear its storage when space is short. Put the app on the home screen to protect entries.',
  iphone: 'On an iPhone entries are sent only while the app is open.',
} as const

export const wardTodayWords = {
  nothingDue: 'Nothing due to count',
  due: (n: number, room: string): string => `${places(n)} to count in ${room}`,
  dueMany: (n: number, rooms: number): string => `${places(n)} to count in ${counted(rooms, 'room')}`,
  strip: (room: string, n: number): string => `${room}, ${places(n)}`,
  below: (n: number): string => (n === 0 ? 'none below the line' : `${quantity(n)} below the line`),
  walking: 'In walking order',
  about: (minutes: number): string => `about ${quantity(minutes)} ${minutes === 1 ? 'minute' : 'minutes'}`,
  more: (n: number): string => `${quantity(n)} more`,
  coming: 'What is coming',
  comingRow: (units: number, unit: string): string => `${quantity(units)} ${unit}`,
  due2: (when: string): string => `due ${when}`,
  late: 'late; phone before you count on it',
  out: 'What is out',
  nothingOut: 'No place is empty.',
  nothingComing: 'No delivery is on its way for these rooms.',
  outNext: (units: number, when: string | null): string =>
    units > 0 ? `${quantity(units)} on the way${when ? `, due ${when}` : ''}` : 'nothing ordered yet',
} as const
