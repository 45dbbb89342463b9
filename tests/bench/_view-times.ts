/** What each view costs in one thread: drawing it from planes whose sky is known, and coding it. */
import { estimateNoise } from '@/lib/science/imaging/noise'
import type { BandPlane } from '@/lib/science/imaging/normalise-planes'
import { defaultRecipe } from '@/lib/science/imaging/recipe'
import { renderViews } from '@/lib/science/imaging/render-views'
import { encodePng } from '@/lib/work/stamps/encode-png'
import { BANDS, median, simulated } from './_imaging-run'

const CANDIDATES = 36
const ROUNDS = 5

export function timeOfViews(): string[] {
  const recipe = defaultRecipe(BANDS)
  const candidates = Array.from({ length: CANDIDATES }, (_, index) => planesOf(index))
  const time = (work: (planes: BandPlane[]) => void): number => {
    const once = () => {
      const started = performance.now()
      for (const planes of candidates) work(planes)
      return (performance.now() - started) / CANDIDATES
    }
    once()
    return median(Array.from({ length: ROUNDS }, once))
  }
  const none = time((planes) => renderViews(planes, { ...recipe, views: [] }))
  const drawn = recipe.views.map((view) => {
    const only = { ...recipe, views: [view] }
    const drawing = time((planes) => renderViews(planes, only)) - none
    const pictures = candidates.flatMap((planes) => renderViews(planes, only))
    const coding = codingTime(pictures)
    return `${view} ${drawing.toFixed(2)} + ${coding.toFixed(2)}`
  })
  return [
    `  milliseconds a view in one thread, drawing + coding: ${drawn.join(', ')}; all bands normalised ${none.toFixed(2)}`,
  ]
}

function codingTime(pictures: ReturnType<typeof renderViews>): number {
  const once = () => {
    const started = performance.now()
    for (const picture of pictures) encodePng(picture)
    return (performance.now() - started) / pictures.length
  }
  once()
  return median(Array.from({ length: ROUNDS }, once))
}

function planesOf(index: number): BandPlane[] {
  const { bands, width, height, pixelScaleArcsec } = simulated(index)
  return bands.map(({ band, data }) => {
    return { band, width, height, data, pixelScaleArcsec, sky: estimateNoise(data, width, height) }
  })
}
