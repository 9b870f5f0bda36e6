/** One component of an AI's value. `n` digits, `x` CSET 82, `y` CSET 39, `z` base64url. */
export interface AiPart {
  set: 'n' | 'x' | 'y' | 'z'
  min: number
  max: number
  /** What the component must satisfy besides its characters. */
  lint: string[]
}
export interface AiSpec {
  parts: AiPart[]
  /** Predefined length: no separator needed after it. */
  fixed: boolean
  /** May stand in the query of a Digital Link. */
  attribute: boolean
}

/**
 * The identifiers met on a ward, in the notation of the GS1 Syntax Dictionary: `*` predefined length, then the parts
 * (`N14` exactly, `X..20` up to), each with its checks. `|` marks primary keys, which may not be in a link's query. Written from the GS1 Syntax Dictionary (July 2026).
 */
const table = `
00 *| N18,csum
01 *| N14,csum
02 * N14,csum
03 *| N14,csum
10 . X..20
11 * N6,yymmd0
12 * N6,yymmd0
13 * N6,yymmd0
15 * N6,yymmd0
16 * N6,yymmd0
17 * N6,yymmd0
20 * N2
21 . X..20
22 . X..20
235 . X..28
240 . X..30
241 . X..30
242 . N..6
243 . X..20
250 . X..30
251 . X..30
253 | N13,csum X0..17
254 . X..20
255 | N13,csum N0..12
30 . N..8
31nn * N6
32nn * N6
33nn * N6
34nn * N6
35nn * N6
36nn * N6
37 . N..8
390n . N..15
391n . N3 N..15
392n . N..15
393n . N3 N..15
394n . N4
395n . N6
400 . X..30
401 | X..30
402 | N17,csum
403 . X..30
410 * N13,csum
411 * N13,csum
412 * N13,csum
413 * N13,csum
414 *| N13,csum
415 * N13,csum
416 * N13,csum
417 *| N13,csum
420 . X..20
421 . N3 X..9
422 . N3
423 . N3 N0..12,threes
424 . N3
425 . N3 N0..12,threes
426 . N3
427 . X..3
4300 . X..35
4301 . X..35
4302 . X..70
4303 . X..70
4304 . X..70
4305 . X..70
4306 . X..70
4307 . X2
4308 . X..30
4309 . N20
4310 . X..35
4311 . X..35
4312 . X..70
4313 . X..70
4314 . X..70
4315 . X..70
4316 . X..70
4317 . X2
4318 . X..20
4319 . X..30
4320 . X..35
4321 . N1,yesno
4322 . N1,yesno
4323 . N1,yesno
4324 . N10,yymmd0hhmm
4325 . N10,yymmd0hhmm
4326 . N6,yymmdd
4330 . N6 X0..1,minus
4331 . N6 X0..1,minus
4332 . N6 X0..1,minus
4333 . N6 X0..1,minus
7001 . N13
7002 . X..30
7003 . N10,yymmddhhmm
7004 . N..4
7005 . X..12
7006 . N6,yymmdd
7007 . N6,yymmdd N0..6,yymmdd
7008 . X..3
7009 . X..10
7010 . X..2
7011 . N6,yymmdd N0..4,hhmm
7020 . X..20
7021 . X..20
7022 . X..20
7023 . X..30
7030 . N3 X..27
7031 . N3 X..27
7032 . N3 X..27
7033 . N3 X..27
7034 . N3 X..27
7035 . N3 X..27
7036 . N3 X..27
7037 . N3 X..27
7038 . N3 X..27
7039 . N3 X..27
7040 . N1 X3
710 . X..20
711 . X..20
712 . X..20
713 . X..20
714 . X..20
715 . X..20
716 . X..20
717 . X..20
723n . X2 X..28
7240 . X..20
7241 . N2
7242 . X..25
7250 . N8,yyyymmdd
7251 . N12,yyyymmddhhmm
7252 . N1
7253 . X..40
7254 . X..40
7255 . X..10
7256 . X..90
7257 . X..70
7258 . X3
7259 . X..40
8001 . N14
8002 . X..20
8003 | N1,zero N13,csum X0..16
8004 | X..30
8005 . N6
8006 | N14,csum N4,piece
8007 . X..34
8008 . N8,yymmddhh N0..4,mmss
8009 . X..50
8010 | Y..30
8011 . N..12,nozero
8012 . X..20
8013 | X..25,csumalpha
8014 . X..25,csumalpha
8017 | N18,csum
8018 | N18,csum
8019 . N..10
8020 . X..25
8026 . N14,csum N4,piece
8030 . Z..90
8110 . X..70
8111 . N4
8112 . X..70
8200 . X..70
90 . X..30
91 . X..90
92 . X..90
93 . X..90
94 . X..90
95 . X..90
96 . X..90
97 . X..90
98 . X..90
99 . X..90
`

function readPart(text: string): AiPart {
  const [form = '', ...lint] = text.split(',')
  const match = /^([NXYZ])(?:([0-9]+)|([0-9]*)\.\.([0-9]+))$/.exec(form)
  if (!match) throw new RangeError(`not a component: ${text}`)
  const [, set = 'X', exact, from, to] = match
  const max = Number(exact ?? to)
  return { set: set.toLowerCase() as AiPart['set'], min: exact ? max : Number(from || 1), max, lint }
}

const specs = new Map<string, AiSpec>()
for (const line of table.trim().split('\n')) {
  const [ai = '', flags = '', ...parts] = line.split(' ')
  const spec = { parts: parts.map(readPart), fixed: flags.includes('*'), attribute: !flags.includes('|') }
  const last = ai.endsWith('nn') ? 100 : ai.endsWith('n') ? 10 : 1
  const stem = ai.replace(/n+$/, '')
  for (let i = 0; i < last; i += 1) {
    // The last digit of 31nn–36nn is the number of decimals, 0 to 5.
    if (last === 100 && i % 10 > 5) continue
    specs.set(last === 1 ? ai : stem + String(i).padStart(last === 100 ? 2 : 1, '0'), spec)
  }
}

/** The specification of an AI, or undefined when we do not know it. */
export function aiSpec(ai: string): AiSpec | undefined {
  return specs.get(ai)
}

/**
 * Length of an AI, fixed by its first two digits, so that an unknown one can still be told as unknown.
 * Source: GS1 Syntax Engine, `ai.c`.
 */
export function aiLength(text: string): number {
  const lead = text.slice(0, 2)
  if (['23', '24', '25', '40', '41', '42', '71'].includes(lead)) return 3
  if (/^(3[1-69]|43|7[02]|8[0-2])$/.test(lead)) return 4
  // The dictionary holds no AI there; four characters show best what was met.
  if (!specs.has(lead)) return 4
  return 2
}
