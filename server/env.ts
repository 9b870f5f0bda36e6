import { z } from 'zod'
import { resolve } from 'node:path'

const flag = z.enum(['yes', 'no'])

const Env = z.object({
  NODE_ENV: z.enum(['development', 'test', 'production']).default('development'),
  PORT: z.coerce.number().int().min(0).max(65_535).default(4310),
  HOST: z.string().default('127.0.0.1'),
  DATA_DIR: z.string().default('.data'),
  DATABASE_URL: z.string().min(1),
  DATABASE_ADMIN_URL: z.string().optional(),
  SMTP_URL: z.string().optional(),
  UPLOAD_URL: z.string().optional(),
  PUBLIC_URL: z.string().optional(),
  TRUST_PROXY: z.string().optional(),
  SESSION_SECRET: z.string().optional(),
  DEMO: flag.optional(),
  LOG_LEVEL: z.enum(['silent', 'fatal', 'error', 'warn', 'info', 'debug', 'trace']).default('warn'),
  CLOCK_NOW: z.iso.datetime({ offset: true }).optional(),
})

/** Settings of one running server. */
export interface ServerEnv {
  production: boolean
  port: number
  host: string
  dataDir: string
  databaseUrl: string
  adminUrl: string
  smtpUrl: string | null
  publicUrl: string | null
  trustProxy: string | null
  sessionSecret: string | null
  demo: 'yes' | 'no' | null
  logLevel: string
  clockNow: Date | null
}

/** Reads the environment; this is the only place that does. @throws {Error} one sentence a person can act on */
export function readEnv(source: Record<string, string | undefined>): ServerEnv {
  const filled = Object.fromEntries(Object.entries(source).filter(([, value]) => value !== undefined && value !== ''))
  const parsed = Env.safeParse(filled)
  if (!parsed.success) {
    const first = parsed.error.issues[0]
    throw new Error(`Setting ${first?.path.join('.') ?? ''}: ${first?.message ?? 'cannot be used'}`)
  }
  const env = parsed.data
  const production = env.NODE_ENV === 'production'
  if (production && env.CLOCK_NOW) throw new Error('Setting CLOCK_NOW: not in production')
  if (production && !env.SESSION_SECRET) throw new Error('Setting SESSION_SECRET: needed in production')
  if (production && !env.PUBLIC_URL?.startsWith('https://') && !env.TRUST_PROXY) {
    throw new Error('Settings PUBLIC_URL and TRUST_PROXY: production serves https, by itself or behind a proxy')
  }
  return {
    production,
    port: env.PORT,
    host: env.HOST,
    dataDir: resolve(env.DATA_DIR),
    databaseUrl: env.DATABASE_URL,
    adminUrl: env.DATABASE_ADMIN_URL ?? env.DATABASE_URL,
    smtpUrl: env.SMTP_URL ?? null,
    publicUrl: env.PUBLIC_URL ?? null,
    trustProxy: env.TRUST_PROXY ?? null,
    sessionSecret: env.SESSION_SECRET ?? null,
    demo: env.DEMO ?? null,
    logLevel: env.LOG_LEVEL,
    clockNow: env.CLOCK_NOW ? new Date(env.CLOCK_NOW) : null,
  }
}
