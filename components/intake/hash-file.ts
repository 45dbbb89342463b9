/** Above this a file is sent instead: the browser hashes in memory only. */
const MOST_BYTES = 256 * 1024 * 1024

export type HashFile = (file: File) => Promise<string | null>

/** SHA-256 as hex; null where the browser cannot (a page that is neither https nor on this computer) or the file is gone. */
export const hashFile: HashFile = async (file) => {
  if (globalThis.crypto?.subtle === undefined || file.size > MOST_BYTES) return null
  try {
    const hash = await crypto.subtle.digest('SHA-256', await file.arrayBuffer())
    return [...new Uint8Array(hash)].map((byte) => byte.toString(16).padStart(2, '0')).join('')
  } catch {
    return null
  }
}
