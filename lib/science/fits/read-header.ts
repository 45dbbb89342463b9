// A header: 80-character cards in blocks of 2880 bytes up to the END card (FITS Standard 4.0, sections 3.1 and 4).
import { FitsError, type FitsHeader, type FitsValue } from '@/lib/science/fits/fits-types'
import { parseCard } from '@/lib/science/fits/parse-card'

export const BLOCK_BYTES = 2880
const CARD_BYTES = 80
/** Of these a value that is no FITS value is a fault: reading on would show wrong pixels or none. */
const STRUCTURAL =
  /^(SIMPLE|XTENSION|Z?BITPIX|Z?NAXIS\d*|Z?PCOUNT|Z?GCOUNT|BSCALE|BZERO|Z?BLANK|TFIELDS|TFORM\d+|TTYPE\d+|THEAP|ZIMAGE|ZTILE\d+|ZCMPTYPE|ZVAL\d+|ZSCALE|ZZERO|ZQUANTIZ|ZDITHER0)$/
const latin1 = new TextDecoder('latin1')

export interface HeaderUnit {
  header: FitsHeader
  /** Offset of the byte after the header's last block. */
  dataStart: number
}

/**
 * Reads the header that begins at `start`; null when the bytes end before an END card, which the caller names in its words.
 * Bytes outside ASCII 32-126 become '?', so that header text can be shown anywhere.
 */
export function readHeader(bytes: Uint8Array, start: number, hdu: number): HeaderUnit | null {
  const end = findEnd(bytes, start)
  if (end < 0) return null
  const text = latin1.decode(bytes.subarray(start, end)).replace(/[^\x20-\x7e]/g, '?')
  const header: Record<string, FitsValue> = {}
  let open: string | null = null
  for (let at = 0; at < text.length; at += CARD_BYTES) {
    const { keyword, value, valid } = parseCard(text.slice(at, at + CARD_BYTES))
    if (keyword === 'CONTINUE' && open !== null) {
      header[open] = String(header[open]).slice(0, -1) + String(value ?? '')
      open = String(value ?? '').endsWith('&') ? open : null
      continue
    }
    open = null
    if (value === undefined || keyword in header) continue
    if (!valid && STRUCTURAL.test(keyword)) {
      throw new FitsError(
        'bad-header',
        `The header of HDU ${hdu} has ${keyword} = ${value}, which is not a FITS value.`,
      )
    }
    header[keyword] = value
    if (typeof value === 'string' && value.endsWith('&')) open = keyword
  }
  return { header, dataStart: Math.ceil((end - start + CARD_BYTES) / BLOCK_BYTES) * BLOCK_BYTES + start }
}

/** Offset of the END card, or -1. */
function findEnd(bytes: Uint8Array, start: number): number {
  for (let at = start; at + CARD_BYTES <= bytes.length; at += CARD_BYTES) {
    if (bytes[at] !== 0x45 || bytes[at + 1] !== 0x4e || bytes[at + 2] !== 0x44) continue
    if (bytes.subarray(at + 3, at + 8).every((byte) => byte === 0x20)) return at
  }
  return -1
}
