/**
 * Where a band is clipped, what its pixel says is at most a least brightness, and a hue made of it is none of the sky's. There all
 * three channels become the brightest of them, since each is a lower limit: the core is white or grey, and no darker than its
 * rim. Our own choice, no source.
 */
import { clippedOf } from './clipped-pixels'
import type { NormalisedPlane } from './normalise-planes'

/** Share of the hue that goes, by distance from a clipped pixel in columns or rows: interpolation blurs the edge of a cut. */
const FADE = [1, 1, 0.5]

type Channels = [Float32Array, Float32Array, Float32Array]

/** The same channels where nothing is clipped, else new ones. Pixels without data stay so. */
export function neutralCores(planes: readonly NormalisedPlane[], channels: Channels): Channels {
  const { width, height } = planes[0]
  const fade = fadeOf(planes, width, height)
  if (fade === null) return channels
  const faded = channels.map((channel) => channel.slice()) as Channels
  for (let i = 0; i < fade.length; i++) {
    if (fade[i] === 0) continue
    const most = Math.max(...channels.map((channel) => channel[i]))
    for (const channel of faded) channel[i] += fade[i] * (most - channel[i])
  }
  return faded
}

/** How much of the hue goes, pixel by pixel; null where all stays. */
function fadeOf(planes: readonly NormalisedPlane[], width: number, height: number): Float32Array | null {
  let fade: Float32Array | null = null
  for (const plane of planes) {
    for (const pixel of clippedOf(plane)) {
      fade ??= new Float32Array(width * height)
      const x = pixel % width
      const y = (pixel - x) / width
      const reach = FADE.length - 1
      for (let row = Math.max(0, y - reach); row <= Math.min(height - 1, y + reach); row++) {
        for (let column = Math.max(0, x - reach); column <= Math.min(width - 1, x + reach); column++) {
          const share = FADE[Math.max(Math.abs(row - y), Math.abs(column - x))]
          if (share > fade[row * width + column]) fade[row * width + column] = share
        }
      }
    }
  }
  return fade
}
