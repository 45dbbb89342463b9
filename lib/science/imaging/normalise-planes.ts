/** Brings band planes to one scale, their own sky noise, which makes stamps independent of the unit of the pixels. */
import { estimateNoise, type Noise } from './noise'

export interface BandPlane {
  band: string
  width: number
  height: number
  /** Row by row; row 0 is the bottom row, as in FITS. */
  data: Float32Array
  /** Where known, bands of different scales are brought to one grid before they are combined. */
  pixelScaleArcsec?: number | null
  /** Where known (as in StampGeometry), bands that lie differently on the sky are turned before they are combined. */
  orientation?: PlaneOrientation | null
  /** What estimateNoise says of `data`, where it has been asked already. Whoever makes other data leaves it out. */
  sky?: Noise
}

/** Direction of north, degrees counter-clockwise from up, and whether east is 90 degrees counter-clockwise of it. */
export interface PlaneOrientation {
  northAngleDeg: number
  eastLeft: boolean
}

export interface NormalisedPlane {
  band: string
  width: number
  height: number
  /** (pixel - sky) / noise, rows as given; NaN where the pixel is not finite. */
  values: Float32Array
  /** Standard deviation of the sky in the plane's own unit; 0 when the plane is not usable. */
  sigma: number
  /** Pixels that are not finite. */
  missing: number
  /** 'empty': no finite pixel. 'constant': all finite pixels equal, so there is nothing to see. */
  state: 'usable' | 'constant' | 'empty'
  /** What clippedPixels says of the plane as its band was delivered, where it has been asked already. */
  clipped?: readonly number[]
}

/** @throws RangeError when the number of pixels is not width x height. */
export function normalisePlane({ band, width, height, data, sky }: BandPlane): NormalisedPlane {
  if (data.length !== width * height) {
    throw new RangeError(`Band ${band} has ${data.length} pixels, not ${width} x ${height}.`)
  }
  const { background, sigma } = sky ?? estimateNoise(data, width, height)
  const values = new Float32Array(data.length)
  const perSigma = sigma > 0 ? 1 / sigma : 0
  let missing = 0
  for (let i = 0; i < data.length; i++) {
    const value = data[i]
    if (value - value === 0) values[i] = (value - background) * perSigma
    else {
      values[i] = Number.NaN
      missing++
    }
  }
  const state = missing === data.length ? 'empty' : sigma > 0 ? 'usable' : 'constant'
  return { band, width, height, values, sigma, missing, state }
}
