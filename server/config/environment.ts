/** The configuration, read once from the environment: every fault is found and said at once. */
import { readFileSync } from 'node:fs'
import { availableParallelism } from 'node:os'
import { resolve } from 'node:path'
import { z } from 'zod'
import { isWeakSecret } from './weakSecret.ts'

const loopbackHosts = ['127.0.0.1', 'localhost', '::1']
export const isLoopback = (host: string): boolean => loopbackHosts.includes(host.replace(/^\[|\]$/g, ''))

const wholeNumber = (least: number, most: number) =>
  z
    .string()
    .regex(/^\d+$/, 'must be a whole number')
    .transform(Number)
    .refine((value) => value >= least && value <= most, `must be between ${least} and ${most}`)

const url = (protocols: string[]) =>
  z.string().refine((value) => URL.canParse(value) && protocols.includes(new URL(value).protocol), {
    message: `must be a URL that begins with ${protocols.map((protocol) => `${protocol}//`).join(' or ')}`,
  })

/** Express's own notation: how many proxies stand in front, or which addresses they have. */
const trustProxy = z
  .string()
  .transform((value): boolean | number | string =>
    value === '' || value === 'false' ? false : /^\d+$/.test(value) ? Number(value) : value,
  )

const variables = z.object({
  NODE_ENV: z.enum(['production', 'development', 'test']).default('production'),
  INSTALLATION_KIND: z.enum(['demonstration', 'real']).default('real'),
  HOST: z.string().min(1).default('127.0.0.1'),
  PORT: wholeNumber(0, 65_535).default(8470),
  DATABASE_URL: url(['mariadb:', 'mysql:']).refine(
    (value) => !URL.canParse(value) || new URL(value).pathname.length > 1,
    'must name a database after the host',
  ),
  DATA_DIR: z.string().min(1).default('var'),
  PUBLIC_URL: url(['http:', 'https:']).optional(),
  JWT_SECRET: z.string().optional(),
  JWT_SECRET_FILE: z.string().optional(),
  BCRYPT_COST: wholeNumber(4, 15).default(12),
  LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'trace', 'silent']).default('info'),
  TRUST_PROXY: trustProxy.default(false),
  SMTP_URL: url(['smtp:', 'smtps:']).optional(),
  MAIL_FROM: z.string().min(3).max(254).optional(),
  WORKERS: wholeNumber(1, 32).optional(),
  DEMONSTRATION_PAST_DIR: z.string().min(1).optional(),
})

export interface Environment {
  mode: 'production' | 'development' | 'test'
  installationKind: 'demonstration' | 'real'
  host: string
  port: number
  databaseUrl: string
  /** Absolute path. */
  dataFolder: string
  /** As people reach the program; without a slash at its end. */
  publicUrl: string
  jwtSecret: string
  bcryptCost: number
  logLevel: string
  trustProxy: boolean | number | string
  smtpUrl: string | null
  mailFrom: string | null
  /** Threads that estimate. */
  workers: number
  demonstrationPastFolder: string | null
}

/** Every fault in one error; its message is for people. */
export class ConfigurationError extends Error {
  readonly faults: string[]

  constructor(faults: string[]) {
    super(`The configuration cannot be used:\n${faults.map((fault) => `  - ${fault}`).join('\n')}`)
    this.name = 'ConfigurationError'
    this.faults = faults
  }
}

function readSecret(given: { JWT_SECRET?: string; JWT_SECRET_FILE?: string }, faults: string[]): string {
  if (given.JWT_SECRET !== undefined) return checkedSecret('JWT_SECRET', given.JWT_SECRET, faults)
  if (given.JWT_SECRET_FILE === undefined) {
    faults.push('JWT_SECRET_FILE: name a file with a random secret of at least 32 characters')
    return ''
  }
  try {
    return checkedSecret('JWT_SECRET_FILE', readFileSync(given.JWT_SECRET_FILE, 'utf8').trim(), faults)
  } catch {
    faults.push(`JWT_SECRET_FILE: the file ${given.JWT_SECRET_FILE} cannot be read`)
    return ''
  }
}

function checkedSecret(name: string, secret: string, faults: string[]): string {
  if (isWeakSecret(secret)) faults.push(`${name}: the secret is weak; at least 32 random characters are needed`)
  return secret
}

/** Empty values count as absent, as a configuration file often leaves them. */
const present = (source: Record<string, string | undefined>) =>
  Object.fromEntries(Object.entries(source).filter(([, value]) => value !== undefined && value !== ''))

export function readEnvironment(source: Record<string, string | undefined>): Environment {
  const given = present(source)
  const parsed = variables.safeParse(given)
  const faults = parsed.success
    ? []
    : parsed.error.issues.map((issue) =>
        given[String(issue.path[0])] === undefined
          ? `${issue.path.join('.')}: is missing`
          : `${issue.path.join('.')}: ${issue.message}`,
      )
  const jwtSecret = readSecret(given, faults)
  faults.push(...faultsBetween(given))
  if (!parsed.success || faults.length > 0) throw new ConfigurationError(faults)
  const value = parsed.data
  const hostInUrl = value.HOST.includes(':') ? `[${value.HOST}]` : value.HOST
  return {
    mode: value.NODE_ENV,
    installationKind: value.INSTALLATION_KIND,
    host: value.HOST,
    port: value.PORT,
    databaseUrl: value.DATABASE_URL,
    dataFolder: resolve(value.DATA_DIR),
    publicUrl: (value.PUBLIC_URL ?? `http://${hostInUrl}:${value.PORT}`).replace(/\/+$/, ''),
    jwtSecret,
    bcryptCost: value.BCRYPT_COST,
    logLevel: value.LOG_LEVEL,
    trustProxy: value.TRUST_PROXY,
    smtpUrl: value.SMTP_URL ?? null,
    mailFrom: value.MAIL_FROM ?? null,
    workers: value.WORKERS ?? Math.min(4, availableParallelism()),
    demonstrationPastFolder: value.DEMONSTRATION_PAST_DIR ? resolve(value.DEMONSTRATION_PAST_DIR) : null,
  }
}

/** Values that are right each by itself and wrong together. */
function faultsBetween(given: Record<string, string | undefined>): string[] {
  const faults: string[] = []
  const host = given.HOST ?? '127.0.0.1'
  const cost = Number(given.BCRYPT_COST ?? 12)
  if (given.NODE_ENV !== 'test' && cost < 12) faults.push('BCRYPT_COST: must be at least 12')
  if (given.INSTALLATION_KIND === 'demonstration' && !isLoopback(host)) {
    faults.push(`HOST: the demonstration answers on loopback only, not on ${host}`)
  }
  const reached = given.PUBLIC_URL && URL.canParse(given.PUBLIC_URL) ? new URL(given.PUBLIC_URL) : null
  if (reached && reached.protocol === 'http:' && !isLoopback(reached.hostname)) {
    faults.push('PUBLIC_URL: must begin with https:// unless it is on loopback')
  }
  if (!reached && !given.PUBLIC_URL && !isLoopback(host)) {
    faults.push('PUBLIC_URL: is missing; it is needed when HOST is not loopback')
  }
  return faults
}
