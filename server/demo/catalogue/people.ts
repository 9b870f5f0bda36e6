import type { Role } from '#shared/contracts/contract.ts'

export interface DemoPerson {
  staffCode: string
  name: string
  email: string
  role: Role
  /** Room codes; null: every room. */
  rooms: string[] | null
  /** Whose sign-in is printed at the start. */
  signIn: boolean
}

const alder = ['ALD-1', 'ALD-2']
const cedar = ['CED-1', 'CED-2']
const at = (local: string): string => `${local}@tallowmere.example`

/** Invented people. Ward staff count in their own rooms; the five with a sign-in are for whoever tries the demo. */
export const people: DemoPerson[] = [
  { staffCode: '2041', name: 'Nadia Fernsby', email: at('nurse'), role: 'nurse', rooms: alder, signIn: true },
  { staffCode: '2042', name: 'Tobias Underhay', email: at('t.underhay'), role: 'nurse', rooms: alder, signIn: false },
  { staffCode: '2043', name: 'Grace Ollerton', email: at('g.ollerton'), role: 'nurse', rooms: alder, signIn: false },
  { staffCode: '2051', name: 'Ifeoma Larksby', email: at('i.larksby'), role: 'nurse', rooms: ['BIR-1'], signIn: false },
  {
    staffCode: '2052',
    name: 'Piet Wrangmoor',
    email: at('p.wrangmoor'),
    role: 'nurse',
    rooms: ['BIR-1'],
    signIn: false,
  },
  { staffCode: '2061', name: 'Sunniva Hallam', email: at('s.hallam'), role: 'nurse', rooms: cedar, signIn: false },
  { staffCode: '2062', name: 'Rashid Emberley', email: at('r.emberley'), role: 'nurse', rooms: cedar, signIn: false },
  {
    staffCode: '2071',
    name: 'Colette Marwyck',
    email: at('c.marwyck'),
    role: 'nurse',
    rooms: ['ELD-1'],
    signIn: false,
  },
  {
    staffCode: '2072',
    name: 'Dewi Thornbeck',
    email: at('d.thornbeck'),
    role: 'nurse',
    rooms: ['ELD-1'],
    signIn: false,
  },
  {
    staffCode: '2081',
    name: 'Anneke Fairlough',
    email: at('a.fairlough'),
    role: 'nurse',
    rooms: ['HAZ-1'],
    signIn: false,
  },
  {
    staffCode: '2101',
    name: 'Hester Quillmoor',
    email: at('h.quillmoor'),
    role: 'nurse',
    rooms: ['LIN-1'],
    signIn: false,
  },
  {
    staffCode: '2111',
    name: 'Amadi Rowthorn',
    email: at('a.rowthorn'),
    role: 'nurse',
    rooms: ['MAP-1'],
    signIn: false,
  },
  {
    staffCode: '2121',
    name: 'Sorcha Venlow',
    email: at('s.venlow'),
    role: 'nurse',
    rooms: ['OSI-1'],
    signIn: false,
  },
  {
    staffCode: '2131',
    name: 'Tomas Ellerby',
    email: at('t.ellerby'),
    role: 'nurse',
    rooms: ['POP-1'],
    signIn: false,
  },
  {
    staffCode: '2091',
    name: 'Yusuf Penhaven',
    email: at('y.penhaven'),
    role: 'nurse',
    rooms: ['ROW-1'],
    signIn: false,
  },
  {
    staffCode: '3011',
    name: 'Bronwen Ashdale',
    email: at('coordinator'),
    role: 'coordinator',
    rooms: null,
    signIn: true,
  },
  {
    staffCode: '3012',
    name: 'Kofi Saltmere',
    email: at('k.saltmere'),
    role: 'coordinator',
    rooms: null,
    signIn: false,
  },
  { staffCode: '4011', name: 'Ingrid Vellacombe', email: at('reviewer'), role: 'reviewer', rooms: null, signIn: true },
  {
    staffCode: '4012',
    name: 'Marcus Ettrickson',
    email: at('second.reviewer'),
    role: 'reviewer',
    rooms: null,
    signIn: true,
  },
  { staffCode: '5011', name: 'Leila Northwood', email: at('admin'), role: 'administrator', rooms: null, signIn: true },
]
