/**
 * The colour view: Lupton composite of noise-normalised planes. Where the light is weaker than the noise its hue is
 * nothing but noise, so there colour is taken from smoothed channels and fades to grey; brightness stays native.
 */
import { channelWeights, colourBalance, mixPlanes } from './colour-channels'
import { luptonFromLimits, luptonRgb } from './lupton'
import { neutralCores } from './neutral-cores'
import type { NormalisedPlane } from './normalise-planes'
import type { ColourLimits, Recipe } from './recipe'
import { MISSING_GREY } from './render-grey'
import { Scratch } from './scratch'
import { smoothBinomial } from './smooth'
import { whiteLevel } from './white-level'

/** A colour picture before its brightness is drawn: channels in units of the noise, row 0 = bottom. */
export interface ColourChannels {
  red: Float32Array
  green: Float32Array
  blue: Float32Array
  /** What the white point is measured on. Missing pixels are 0 here and in the channels. */
  intensity: Float32Array
  /** Pixels without data in a band that counts. */
  missing: number[]
}

/** The channels with their hue calmed, from at least two usable planes of one size, shortest wavelength first. */
export function colourChannels(planes: NormalisedPlane[], recipe: Recipe, limits: ColourLimits): ColourChannels {
  const { width, height } = planes[0]
  const balance = colourBalance(planes.map((plane) => plane.sigma))
  const bandWeights = planes.map((plane, k) => (recipe.weights?.[plane.band] ?? 1) * balance[k])
  const [red, green, blue] = channelWeights(planes.length).map((shares) =>
    mixPlanes(
      planes,
      shares.map((share, k) => share * bandWeights[k]),
    ),
  ) as Mixed
  const missing = missingPixels(red, green, blue)
  const mixed: Mixed = [red, green, blue]
  const neutral = recipe.version >= 2 ? neutralCores(planes, mixed) : mixed
  const [r, g, b, mean] = calmHues(neutral, width, height, limits)
  // White stays where it is, so that a core without hue changes nothing of the picture round it.
  const intensity = neutral === mixed ? mean : meanOf(mixed)
  return { red: r, green: g, blue: b, intensity, missing }
}

/** RGB interleaved, row 0 = top, from at least two usable planes of one size, shortest wavelength first. */
export function renderColour(
  planes: NormalisedPlane[],
  recipe: Recipe,
  limits: ColourLimits = recipe.colour,
): Uint8Array {
  const { width, height } = planes[0]
  const { red, green, blue, intensity, missing } = colourChannels(planes, recipe, limits)
  const white = whiteLevel(intensity, limits) - limits.blackSigma
  const { stretch, Q } = luptonFromLimits(white, limits.softeningSigma)
  const upward = luptonRgb(red, green, blue, { minimum: limits.blackSigma, stretch, Q })
  for (const i of missing) upward.fill(MISSING_GREY, 3 * i, 3 * i + 3)
  return flipRows(upward, 3 * width, height)
}

function missingPixels(r: Float32Array, g: Float32Array, b: Float32Array): number[] {
  const missing: number[] = []
  for (let i = 0; i < r.length; i++) {
    const sum = r[i] + g[i] + b[i]
    if (sum !== sum) missing.push(i)
  }
  return missing
}

function meanOf([red, green, blue]: Mixed): Float32Array {
  return red.map((value, i) => {
    const mean = (value + green[i] + blue[i]) / 3
    return mean === mean ? mean : 0
  })
}

type Mixed = [Float32Array, Float32Array, Float32Array]
type Channels = [Float32Array, Float32Array, Float32Array, Float32Array]

const work = { redness: new Scratch(), blueness: new Scratch() }
const smoothed = { intensity: new Scratch(), redness: new Scratch(), blueness: new Scratch() }

/** Channels with their hue calmed, and the intensity. Missing pixels come out as 0. */
function calmHues(
  [red, green, blue]: Mixed,
  width: number,
  height: number,
  { hueFromSigma, saturation }: ColourLimits,
): Channels {
  const size = red.length
  const intensity = new Float32Array(size)
  const redness = work.redness.take(size)
  const blueness = work.blueness.take(size)
  for (let i = 0; i < size; i++) {
    const mean = (red[i] + green[i] + blue[i]) / 3
    const known = mean === mean
    if (known) intensity[i] = mean
    redness[i] = known ? red[i] - mean : 0
    blueness[i] = known ? blue[i] - mean : 0
  }
  const smoothIntensity = smoothBinomial(intensity, width, height, 1, smoothed.intensity.take(size))
  const smoothRedness = smoothBinomial(redness, width, height, 1, smoothed.redness.take(size))
  const smoothBlueness = smoothBinomial(blueness, width, height, 1, smoothed.blueness.take(size))
  const r = new Float32Array(size)
  const g = new Float32Array(size)
  const b = new Float32Array(size)
  const threshold = hueFromSigma * hueFromSigma
  for (let i = 0; i < size; i++) {
    const level = smoothIntensity[i] > 0 ? smoothIntensity[i] : 0
    const power = level * level
    // Full hue well above the threshold; native hue another factor of ten in power above that.
    const hue = (saturation * power) / (power + threshold)
    const native = power / (power + 100 * threshold)
    const dRed = hue * (smoothRedness[i] + native * (redness[i] - smoothRedness[i]))
    const dBlue = hue * (smoothBlueness[i] + native * (blueness[i] - smoothBlueness[i]))
    const mean = intensity[i]
    r[i] = mean + dRed
    b[i] = mean + dBlue
    g[i] = mean - dRed - dBlue
  }
  return [r, g, b, intensity]
}

function flipRows(pixels: Uint8Array, rowLength: number, height: number): Uint8Array {
  const flipped = new Uint8Array(pixels.length)
  for (let y = 0; y < height; y++) {
    flipped.set(pixels.subarray(y * rowLength, (y + 1) * rowLength), (height - 1 - y) * rowLength)
  }
  return flipped
}
