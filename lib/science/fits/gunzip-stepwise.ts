// A large gzip file unpacked only as far as its headers account for: what is hidden behind an innocent first image is refused
// when it shows, before it is unpacked.
import { FitsError } from '@/lib/science/fits/fits-types'
import { beginsExtension, unitAt, unitEnd, type Unit } from '@/lib/science/fits/find-units'
import { refuseForeignFormat } from '@/lib/science/fits/foreign-format'
import { gunzipChunks, gzipFault } from '@/lib/science/fits/gunzip'

/** Common practice, no source: headers have tens of kilobytes, and nothing but padding follows the last unit. */
const MOST_HEADER_BYTES = 1024 * 1024
const MOST_TRAILING_BYTES = 1024 * 1024
/** Of all units without pixels together: catalogues that travel with a cutout are smaller. */
const MOST_OTHER_BYTES = 32 * 1024 * 1024
const FIRST_BYTES = 1024 * 1024

/**
 * @param check sees each unit when its header is there and its data are not yet.
 * @param watch hears how many bytes have been unpacked so far.
 * @throws FitsError when the stream is damaged or the file goes beyond what its headers and the limits allow.
 */
export async function gunzipStepwise(
  bytes: Uint8Array,
  maxBytes: number,
  check: (unit: Unit) => void,
  watch: (unpacked: number) => void = () => {},
): Promise<Uint8Array> {
  const scout = new Scout(bytes.length, maxBytes, check)
  try {
    for await (const chunk of gunzipChunks(bytes)) {
      scout.take(chunk)
      watch(scout.length)
    }
  } catch (cause) {
    throw cause instanceof FitsError ? cause : gzipFault(bytes.length, cause)
  }
  return scout.unpacked()
}

class Scout {
  length = 0
  #bytes = new Uint8Array(FIRST_BYTES)
  /** Where the next header begins; null behind the last unit. */
  #next: number | null = 0
  #end = 0
  #units = 0
  #other = 0

  constructor(
    private readonly packed: number,
    private readonly maxBytes: number,
    private readonly check: (unit: Unit) => void,
  ) {}

  unpacked(): Uint8Array {
    return this.#bytes.subarray(0, this.length)
  }

  take(chunk: Uint8Array): void {
    this.#refuseBeyond(this.length + chunk.length, this.maxBytes, 'in all')
    if (this.length + chunk.length > this.#bytes.length) {
      const grown = new Uint8Array(Math.max(2 * this.#bytes.length, this.length + chunk.length))
      grown.set(this.unpacked())
      this.#bytes = grown
    }
    this.#bytes.set(chunk, this.length)
    this.length += chunk.length
    while (this.#next !== null && this.length >= this.#next + 80 && this.#readUnit(this.#next));
    if (this.#next === null) this.#refuseBeyond(this.length - this.#end, MOST_TRAILING_BYTES, 'behind its last HDU')
  }

  /** Returns whether there is more to be read of what is here. */
  #readUnit(start: number): boolean {
    const here = this.unpacked()
    if (start === 0) refuseForeignFormat(here)
    else if (!beginsExtension(here, start)) {
      this.#next = null
      return false
    }
    let unit: Unit
    try {
      unit = unitAt(here, start, this.#units)
    } catch (error) {
      if (!(error instanceof FitsError) || error.fault !== 'truncated-header') throw error
      if (this.length - start > MOST_HEADER_BYTES) throw error
      return false
    }
    this.check(unit)
    if (unit.kind !== 'image' && unit.kind !== 'tiles') {
      this.#other += unit.dataBytes
      this.#refuseBeyond(this.#other, MOST_OTHER_BYTES, 'of tables and other data that are no pictures')
    }
    this.#refuseBeyond(unitEnd(unit), this.maxBytes, 'in all')
    this.#units++
    this.#next = this.#end = unitEnd(unit)
    return true
  }

  #refuseBeyond(count: number, most: number, where: string): void {
    if (count <= most) return
    throw new FitsError(
      'too-large',
      `The gzip file of ${this.packed} bytes unpacks to more than the ${most} bytes ${where} that are allowed for one file.`,
    )
  }
}
