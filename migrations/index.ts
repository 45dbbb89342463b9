import type { Migration } from 'kysely'
import * as mainPath from './001-main-path'

/** In order. A migration that has landed is never edited: a change is a new one. */
export const migrations: Record<string, Migration> = {
  '001-main-path': mainPath,
}
