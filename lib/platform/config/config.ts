import path from 'node:path'
import { z } from 'zod'

/** Every setting, read once. Nothing else reads process.env; .env.example documents each. */
const optionalText = z
  .string()
  .optional()
  .transform((text) => (text?.trim() ? text.trim() : undefined))

const Environment = z.object({
  NODE_ENV: z.enum(['development', 'production', 'test']).default('development'),
  RINGSIDE_DATA: z.string().min(1).default('data'),
  RINGSIDE_WORKERS: z.coerce.number().int().min(1).max(64).optional(),
  RINGSIDE_LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'trace', 'silent']).default('info'),
  RINGSIDE_MAX_FILE_MB: z.coerce.number().positive().max(4096).default(256),
  RINGSIDE_MAX_ARCHIVE_MB: z.coerce.number().positive().max(65536).default(4096),
  PORT: z.coerce.number().int().min(1).max(65535).default(3000),
  NEXTAUTH_URL: optionalText.pipe(z.url().optional()),
  NEXTAUTH_SECRET: optionalText,
  SMTP_URL: optionalText.pipe(z.url({ protocol: /^smtps?$/ }).optional()),
  MAIL_FROM: z.string().default('Ringside <ringside@localhost>'),
})

export interface Config {
  readonly production: boolean
  readonly dataFolder: string
  readonly databasePath: string
  readonly blobFolder: string
  readonly temporaryFolder: string
  readonly workers: number | undefined
  readonly logLevel: string
  readonly maxFileBytes: number
  readonly maxArchiveBytes: number
  readonly siteUrl: string
  readonly authSecret: string | undefined
  readonly smtpUrl: string | undefined
  readonly mailFrom: string
}

/** @throws Error naming each setting that is wrong, so that a server with a typing error does not start half-way. */
export function parseConfig(environment: Record<string, string | undefined>): Config {
  const parsed = Environment.safeParse(environment)
  if (!parsed.success) throw new Error(`Settings that cannot be used:\n${z.prettifyError(parsed.error)}`)
  const env = parsed.data
  const dataFolder = path.resolve(/* turbopackIgnore: true */ env.RINGSIDE_DATA)
  return {
    production: env.NODE_ENV === 'production',
    dataFolder,
    databasePath: path.join(dataFolder, 'ringside.sqlite'),
    blobFolder: path.join(dataFolder, 'blobs'),
    temporaryFolder: path.join(dataFolder, 'incoming'),
    workers: env.RINGSIDE_WORKERS,
    logLevel: env.RINGSIDE_LOG_LEVEL,
    maxFileBytes: env.RINGSIDE_MAX_FILE_MB * 1024 * 1024,
    maxArchiveBytes: env.RINGSIDE_MAX_ARCHIVE_MB * 1024 * 1024,
    siteUrl: (env.NEXTAUTH_URL ?? `http://127.0.0.1:${env.PORT}`).replace(/\/$/, ''),
    authSecret: env.NEXTAUTH_SECRET,
    smtpUrl: env.SMTP_URL,
    mailFrom: env.MAIL_FROM,
  }
}

let current: Config | undefined

export function config(): Config {
  current ??= parseConfig(process.env)
  return current
}
