/**
 * The last part of an entry's permanent address: its designation with '-' for each run of characters that an address would have to
 * escape. Kept from release to release, because a designation is given once.
 */
export function entryKey(designation: string): string {
  return designation.replace(/[^A-Za-z0-9.+_-]+/g, '-').replace(/^-+|-+$/g, '') || 'entry'
}

/** The key, or with a number behind it where the release has it for another designation. Adds it to `taken`. */
export function freeKey(designation: string, taken: Set<string>): string {
  const key = entryKey(designation)
  let free = key
  for (let number = 2; taken.has(free); number++) free = `${key}_${number}`
  taken.add(free)
  return free
}
