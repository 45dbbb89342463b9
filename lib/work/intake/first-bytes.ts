import { FitsError } from '@/lib/science/fits/fits-types'
import { refuseForeignFormat } from '@/lib/science/fits/foreign-format'

/** A header's block (FITS Standard 4.0, 3.3.1). */
const BLOCK_BYTES = 2880
const CARD_BYTES = 80

/** Why a file that is to be read as FITS will be refused, as far as its first bytes and its size tell; null when they tell nothing. */
export async function faultOfFirstBytes(file: Blob): Promise<string | null> {
  if (file.size === 0) return null
  const start = new Uint8Array(await file.slice(0, CARD_BYTES).arrayBuffer())
  // What is inside is seen on the server.
  if (start[0] === 0x1f && start[1] === 0x8b) return null
  try {
    refuseForeignFormat(start)
  } catch (error) {
    if (error instanceof FitsError) return error.message
    throw error
  }
  if (file.size >= BLOCK_BYTES) return null
  return `It has ${file.size} bytes, and a FITS header alone has ${BLOCK_BYTES}: the file is cut off.`
}
