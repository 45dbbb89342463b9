import { Problem } from '@/lib/platform/problems/problem'
import { cleanFileName, isArchiveName, isHiddenName, UNSEEN } from '../file-name'
import type { Refusal } from '../refusals'

/** A file inside an archive, its bytes to be streamed once and in order. */
export interface ArchiveMember {
  name: string
  chunks: AsyncIterable<Uint8Array>
}

/** A member that is not there in whole, or is not taken. `rest` says that all after it is lost too. */
export interface LostMember {
  lost: string
  rest: boolean
}

/** What a look through the whole archive tells before anything of it is unpacked. */
export interface ArchiveScan {
  refusal: Refusal | null
  /** Files, folders not counted. */
  members: number
}

/** What opens one kind of archive. Members come again in the same order each time. */
export interface ArchiveReader {
  scan(): Promise<ArchiveScan>
  members(): AsyncGenerator<ArchiveMember | LostMember, void, void>
}

export const unsafe = (name: string, why: string): Refusal => ({
  fault: 'unsafe-archive',
  reason: `The archive holds '${name}', ${why}. Nothing of it was taken.`,
})

export const encrypted = (name: string): Refusal => ({
  fault: 'encrypted-archive',
  reason: `'${name}' in the archive is encrypted. Nothing of it was taken: send it without a password.`,
})

/** The refusal of the whole archive for a name that points out of it; names are only looked at, never opened as paths. */
export function unsafeName(raw: string): Refusal | null {
  const name = raw.replaceAll('\\', '/')
  if (name.startsWith('/') || /^[A-Za-z]:/.test(name)) return unsafe(raw, 'an absolute path')
  if (name.split('/').includes('..')) return unsafe(raw, "a name with '..' that leads out of it")
  return null
}

/** What to do with a member by its name: take it, leave it out in silence, or say why it is not taken. */
export function memberName(archive: string, raw: string): { name: string } | { problem: string } | 'hidden' {
  if (isHiddenName(raw)) return 'hidden'
  if (isArchiveName(raw)) {
    return { problem: `'${raw}' is an archive inside the archive and is not opened. Send its files themselves.` }
  }
  try {
    return { name: cleanFileName(`${archive}/${raw}`) }
  } catch (error) {
    if (error instanceof Problem) return { problem: `'${shown(raw)}' is not taken: ${error.message}` }
    throw error
  }
}

const shown = (raw: string): string => {
  const text = raw.replace(new RegExp(UNSEEN, 'g'), '\ufffd')
  return text.length > 80 ? `${text.slice(0, 80)}…` : text
}
