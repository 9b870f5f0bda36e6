import { hash, verify } from '@node-rs/argon2'

/** argon2id, 19 MiB, two passes. Source: OWASP Password Storage Cheat Sheet. (2 is argon2id in the library's enum.) */
const options = { algorithm: 2, memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const

const atOnce = 4
let running = 0
const waiting: (() => void)[] = []

/** At most four hashes at a time: a hundred sign-ins must not take the memory of the server. */
async function limited<T>(work: () => Promise<T>): Promise<T> {
  if (running >= atOnce) await new Promise<void>((resolve) => waiting.push(resolve))
  running += 1
  try {
    return await work()
  } finally {
    running -= 1
    waiting.shift()?.()
  }
}

export const hashPassword = (password: string): Promise<string> => limited(() => hash(password, options))
export const verifyPassword = (stored: string, password: string): Promise<boolean> =>
  limited(() => verify(stored, password).catch(() => false))

/** Passwords everybody tries first; from memory of public lists of breached passwords. */
const common = new Set([
  '12345678',
  '123456789',
  '1234567890',
  'password',
  'password1',
  'password123',
  'passw0rd',
  'qwertyui',
  'qwerty123',
  'qwertyuiop',
  '11111111',
  '00000000',
  'abc12345',
  'abcd1234',
  'iloveyou',
  'sunshine',
  'princess',
  'football',
  'baseball',
  'welcome1',
  'welcome123',
  'letmein1',
  'trustno1',
  'superman',
  'starwars',
  'computer',
  'hospital',
  'hospital1',
  'nurse123',
  'brimline',
  'tallowmere',
  'changeme',
  'changeme1',
  'administrator',
  'admin123',
  '87654321',
  '1q2w3e4r',
  '1qaz2wsx',
  'zaq12wsx',
])

/** Why a new password is refused, or null. */
export function passwordObjection(
  password: string,
  person: { email: string; name: string; staffCode: string },
): string | null {
  const low = password.toLowerCase()
  if (common.has(low)) return 'this one is on every list of guessed passwords; choose another'
  if (/^(.)\1+$/.test(password)) return 'one character repeated is guessed at once; choose another'
  const own = [person.email.split('@')[0] ?? '', person.staffCode, ...person.name.split(/\s+/)].filter(
    (w) => w.length >= 4,
  )
  if (own.some((word) => low === word.toLowerCase())) return 'your own name is guessed at once; choose another'
  return null
}
