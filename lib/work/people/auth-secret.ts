import 'server-only'
import { randomBytes } from 'node:crypto'
import { mkdirSync, readFileSync, writeFileSync } from 'node:fs'
import path from 'node:path'
import { config } from '@/lib/platform/config/config'

/** The key that signs sessions: the setting, else one made at the first start and kept beside the database. */
export function authSecret(): string {
  const { authSecret: fromSettings, dataFolder } = config()
  if (fromSettings) return fromSettings
  const file = path.join(dataFolder, 'session-secret')
  mkdirSync(dataFolder, { recursive: true })
  try {
    writeFileSync(file, randomBytes(32).toString('base64url'), { mode: 0o600, flag: 'wx' })
  } catch (error) {
    if (!(error instanceof Error && 'code' in error && error.code === 'EEXIST')) throw error
  }
  return readFileSync(file, 'utf8').trim()
}
