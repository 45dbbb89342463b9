// What the FITS reader hands over and how it refuses. The format is FITS Standard 4.0 (2018), cited below by section.

export type FitsValue = string | number | boolean

/**
 * Upper-case keyword -> value. A plain object, so that it crosses worker threads. HIERARCH keywords stand without the word
 * HIERARCH ('ESO DET NAME'). Of a duplicate keyword the first value stands (the standard, 4.1.2.1, leaves it open).
 * A value that is no FITS value (NaN, a complex number) stands as its text. Cards without a value are left out.
 */
export type FitsHeader = Readonly<Record<string, FitsValue>>

export interface FitsImage {
  /** 0 is the primary header and data unit. */
  hdu: number
  /** EXTNAME as written; null when absent or blank, or when it only says that the image is compressed. */
  extname: string | null
  /** As on disk; of a tile-compressed image, the header of the image that was compressed. */
  header: FitsHeader
  width: number
  height: number
  /**
   * One array per two-dimensional image (1, or N of a cube, in axis-3 order), each width * height values, row 0 the BOTTOM
   * row. BSCALE and BZERO are applied, blank pixels are NaN, values beyond 3.4e38 become infinite.
   */
  planes: Float32Array[]
}

export interface FitsFile {
  primary: FitsHeader
  images: FitsImage[]
}

export type FitsFault =
  | 'empty'
  | 'not-fits'
  | 'truncated-header'
  | 'truncated-data'
  | 'bad-header'
  | 'no-image'
  | 'too-large'
  | 'corrupt-compression'
  | 'unsupported'

/** A file that is refused. The message says in a sentence what is wrong, with the numbers, and where there is one, what to do. */
export class FitsError extends Error {
  readonly name = 'FitsError'
  readonly fault: FitsFault
  constructor(fault: FitsFault, message: string, options?: ErrorOptions) {
    super(message, options)
    this.fault = fault
  }
}

export interface FitsLimits {
  /** Most bytes of a file, counted after gunzip. */
  maxBytes: number
  /** Most pixels of all images of a file together. */
  maxPixels: number
}

/** Generous for cutouts: 4096 by 4096 pixels. No source; a cutout of a lens is rarely over 400 by 400. */
export const DEFAULT_FITS_LIMITS: FitsLimits = { maxBytes: 256 * 1024 * 1024, maxPixels: 16 * 1024 * 1024 }
