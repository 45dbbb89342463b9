import { randomUUID } from 'node:crypto'
import { existsSync, mkdirSync, readdirSync, statSync, unlinkSync } from 'node:fs'
import path from 'node:path'
import SQLite from 'better-sqlite3'

/**
 * A process shows that it lives by an exclusive lock on a file of its own, which the system lets go of whatever the process dies
 * of. Unlike a process id it is not given to another process later and is seen from other containers; unlike a time it needs no
 * clock. SQLite takes the lock, since Node cannot: processes that share the database can share such locks.
 */
export interface SignOfLife {
  id: string
  end(): void
}

const DAY_MS = 86_400_000

export function showLife(folder: string): SignOfLife {
  mkdirSync(folder, { recursive: true })
  sweep(folder)
  const id = randomUUID()
  const file = path.join(folder, id)
  const lock = new SQLite(file)
  takeLock(lock)
  return {
    id,
    end() {
      unlinkSync(file)
      lock.close()
    },
  }
}

function takeLock(lock: SQLite.Database): void {
  // The journal would be a second file.
  lock.pragma('journal_mode = memory')
  lock.exec('begin exclusive')
}

/** Whether the process of this sign lives. Where that cannot be told, it does: its leases will run out. */
export function isAlive(folder: string, id: string): boolean {
  if (!/^[0-9a-f-]{36}$/.test(id)) return true
  const file = path.join(folder, id)
  let lock: SQLite.Database | undefined
  try {
    lock = new SQLite(file, { fileMustExist: true, timeout: 0 })
    takeLock(lock)
    return false
  } catch {
    return existsSync(file)
  } finally {
    lock?.close()
  }
}

/** Removes signs of the dead. A fresh one may be about to be locked. */
function sweep(folder: string): void {
  for (const id of readdirSync(folder)) {
    const made = statSync(path.join(folder, id), { throwIfNoEntry: false })?.mtimeMs ?? Infinity
    if (made > Date.now() - DAY_MS || isAlive(folder, id)) continue
    try {
      unlinkSync(path.join(folder, id))
    } catch (error) {
      // Another process that starts now sweeps too.
      if ((error as NodeJS.ErrnoException).code !== 'ENOENT') throw error
    }
  }
}
