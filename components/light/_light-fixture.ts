import { gzipSync } from 'node:zlib'
import { vi } from 'vitest'
import { estimateNoise } from '@/lib/science/imaging/noise'
import { encodePlanes } from '@/lib/science/imaging/plane-codec'
import { defaultRecipe } from '@/lib/science/imaging/recipe'
import { simulateCandidate } from '@/lib/science/lensing/simulate-candidate'

let zipped: Uint8Array<ArrayBuffer> | undefined

/** The planes of a simulated lens as the server sends them. */
export const planesAnswer = (): Response => new Response((zipped ??= makePlanes()))

function makePlanes(): Uint8Array<ArrayBuffer> {
  const { bands, width, height } = simulateCandidate('lens-arc', 3)
  const planes = bands.map(({ band, data }) => {
    const { background, sigma } = estimateNoise(data, width, height)
    return { role: 'band' as const, band, width, height, data, background, noise: sigma, pixelScaleArcsec: null }
  })
  return new Uint8Array(gzipSync(encodePlanes(planes, defaultRecipe(['g', 'r', 'i']))))
}

/** jsdom has no canvas: this one keeps the pictures that are put on it, and has no WebGL. */
export function stubCanvas(): { pictures: Uint8ClampedArray[] } {
  const pictures: Uint8ClampedArray[] = []
  const context = {
    createImageData: (width: number, height: number) => ({ data: new Uint8ClampedArray(4 * width * height) }),
    putImageData: (image: { data: Uint8ClampedArray }) => pictures.push(image.data.slice()),
  }
  vi.spyOn(HTMLCanvasElement.prototype, 'getContext').mockImplementation(((kind: string) =>
    kind === '2d' ? context : null) as unknown as typeof HTMLCanvasElement.prototype.getContext)
  return { pictures }
}
