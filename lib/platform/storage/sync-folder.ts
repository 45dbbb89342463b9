import { open } from 'node:fs/promises'

/**
 * Brings the names in a folder to disk. Syncing a file keeps its bytes over a power cut; which name leads to them is the
 * folder's, and file systems other than ext4 need not keep it along. Windows opens no folder, and its NTFS logs names itself.
 */
export async function syncFolder(folder: string): Promise<void> {
  if (process.platform === 'win32') return
  const handle = await open(folder, 'r')
  try {
    await handle.sync()
  } finally {
    await handle.close()
  }
}
