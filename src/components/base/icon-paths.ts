/**
 * Our own icons: 24 grid, 2 px stroke, butt ends, mitred joins. The glyphs of places stand on one baseline, 3 to 21 at
 * y 20; signs inside buttons have none.
 */
export interface IconShape {
  paths: readonly string[]
  /** Paths that are filled instead of stroked. */
  fills?: readonly string[]
}

const BASE = 'M3 20H21'

export const iconPaths = {
  today: { paths: [BASE, 'M7 16A5 5 0 0 1 17 16', 'M12 5V7.5', 'M4.7 8.7L6.5 10.5', 'M19.3 8.7L17.5 10.5'] },
  count: { paths: [BASE, 'M5.5 5V16', 'M10 5V16', 'M14.5 5V16', 'M19 5V16', 'M3 13.5L21.5 7.5'] },
  rooms: { paths: [BASE, 'M5 4V20', 'M19 4V20', 'M5 12H19', 'M9.5 12V7.5H14.5V12'] },
  restock: { paths: [BASE, 'M5 20V9.5H19V20', 'M5 9.5L8 5H16L19 9.5', 'M12 9.5V13.5'] },
  review: { paths: [BASE, 'M4 16H9V11.5H14V7H20'] },
  hospital: { paths: [BASE, 'M6.5 4V16', 'M4 12.5H9', 'M12 4V16', 'M9.5 7.5H14.5', 'M17.5 4V16', 'M15 12.5H20'] },
  more: { paths: [BASE, 'M4 6H20', 'M4 11H20', 'M4 16H20'] },
  me: { paths: [BASE, 'M12 4A3.5 3.5 0 1 0 12 11A3.5 3.5 0 1 0 12 4Z', 'M5.5 20A6.5 6 0 0 1 18.5 20'] },
  calendar: { paths: [BASE, 'M5 20V6H19V20', 'M5 11H19', 'M9 3.5V8.5', 'M15 3.5V8.5'] },
  cart: { paths: [BASE, 'M3 4H6V16H19', 'M6 8H19V12H6'] },
  label: { paths: [BASE, 'M7 9V4.5H17V9', 'M7 16H4V9H20V16H17', 'M8 14H16'] },
  night: { paths: ['M12 4A8 8 0 1 0 12 20A8 8 0 1 0 12 4Z'], fills: ['M12 4A8 8 0 0 1 12 20Z'] },
  search: { paths: ['M10.5 4A6.5 6.5 0 1 0 10.5 17A6.5 6.5 0 1 0 10.5 4Z', 'M15.2 15.2L20.5 20.5'] },
  close: { paths: ['M5 5L19 19', 'M19 5L5 19'] },
  back: { paths: ['M11 5L4 12L11 19', 'M4 12H21'] },
  forward: { paths: ['M13 5L20 12L13 19', 'M3 12H20'] },
  down: { paths: ['M6 9L12 15L18 9'] },
  up: { paths: ['M6 15L12 9L18 15'] },
  next: { paths: ['M9 5L16 12L9 19'] },
  undo: { paths: ['M8 4L4 8L8 12', 'M4 8H14A5 5 0 0 1 14 18H9'] },
  list: { paths: ['M4 6H20', 'M4 12H16', 'M4 18H20'] },
  torch: { paths: ['M8 3H16V7L14 10V21H10V10L8 7Z', 'M12 13V16'] },
  erase: { paths: ['M8 5H21V19H8L2.5 12Z', 'M11.5 9L17.5 15', 'M17.5 9L11.5 15'] },
  plus: { paths: ['M12 4V20', 'M4 12H20'] },
  minus: { paths: ['M4 12H20'] },
  tick: { paths: ['M4 12.5L9.5 18L20 6.5'] },
  edit: { paths: [BASE, 'M6 16V12.5L14.5 4L18 7.5L9.5 16Z'] },
  caution: { paths: ['M12 4L22 21H2Z', 'M12 10V15.5', 'M12 17V19'] },
  notice: { paths: ['M4 4H20V20H4Z', 'M12 10.5V17', 'M12 7V9'] },
  scan: { paths: ['M4 9V4H9', 'M15 4H20V9', 'M20 15V20H15', 'M9 20H4V15', 'M12 7V17'] },
  camera: { paths: ['M3 8H8L10 5H14L16 8H21V19H3Z', 'M12 10A3.2 3.2 0 1 0 12 16.4A3.2 3.2 0 1 0 12 10Z'] },
  keyboard: { paths: ['M3 6H21V18H3Z', 'M6.5 10H8.5', 'M11 10H13', 'M15.5 10H17.5', 'M8 14.5H16'] },
  sync: {
    paths: ['M4 12A8 8 0 0 1 18 6.5L20 8.5', 'M20 3.5V8.5H15', 'M20 12A8 8 0 0 1 6 17.5L4 15.5', 'M4 20.5V15.5H9'],
  },
  offline: { paths: [BASE, 'M5 16V13', 'M10 16V10', 'M15 16V7', 'M20 16V4', 'M3 4L19 18'] },
  send: { paths: ['M3 5L21 12L3 19L6 12Z', 'M6 12H14'] },
  leave: { paths: [BASE, 'M13 4H5V16H13', 'M10 10H20', 'M16 6L20 10L16 14'] },
} as const satisfies Record<string, IconShape>

export type IconName = keyof typeof iconPaths
