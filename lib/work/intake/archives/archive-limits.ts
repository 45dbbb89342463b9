import type { Refusal } from '../refusals'

/** What an archive may hold. Counts and sizes are looked at before anything is unpacked, and again while it is. */
export interface ArchiveLimits {
  mostMembers: number
  /** One member, unpacked. */
  mostMemberBytes: number
  /** All members, unpacked. */
  mostBytes: number
  /** Unpacked bytes to packed ones; asked only above `ratioFromBytes`, since a blank image packs well. */
  mostRatio: number
  ratioFromBytes: number
}

/** Our choice: real cutouts pack to a half or a tenth, and a campaign's whole search is below 100,000 files a delivery. */
export const archiveLimits = (mostMemberBytes: number, mostArchiveBytes: number): ArchiveLimits => ({
  mostMembers: 100_000,
  mostMemberBytes,
  mostBytes: 16 * mostArchiveBytes,
  mostRatio: 100,
  ratioFromBytes: 64 * 1024 * 1024,
})

const count = (number: number): string => number.toLocaleString('en')

/** The refusal of what has been counted so far, or null. */
export function overLimit(
  limits: ArchiveLimits,
  seen: { members: number; bytes: number; packedBytes: number },
): Refusal | null {
  const bomb = (reason: string): Refusal => ({ fault: 'archive-bomb', reason: `${reason} Nothing of it was taken.` })
  if (seen.members > limits.mostMembers) {
    return bomb(
      `The archive holds more than ${count(limits.mostMembers)} files. Send it in several, or the folder itself.`,
    )
  }
  if (seen.bytes > limits.mostBytes) {
    return bomb(
      `Unpacked, the archive has more than ${count(Math.round(limits.mostBytes / 1024 / 1024))} MiB. Send it in several.`,
    )
  }
  if (seen.bytes > limits.ratioFromBytes && seen.bytes > limits.mostRatio * Math.max(seen.packedBytes, 1)) {
    return bomb(
      `The archive unpacks to more than ${limits.mostRatio} times its size, as no images do. If it is sound, send the folder itself.`,
    )
  }
  return null
}
