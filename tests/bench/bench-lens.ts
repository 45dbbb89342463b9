/** What one frame of dragging a lens costs, and a fit: sixty frames a second leave 16.7 ms for each, drawing included. */
import { discOutlines, lensCurves } from '@/lib/science/lensing/critical-curves'
import { fitSie } from '@/lib/science/lensing/fit-sie'
import { lensModel } from '@/lib/science/lensing/sie-shear'
import { pointImages } from '@/lib/science/lensing/sie-shear-images'
import { arrivalTimeSurface, delayedImages } from '@/lib/science/lensing/time-delays'
import { duration } from '@/tests/bench/_peer'

const FRAMES = 2000

export async function benchLens(): Promise<string[]> {
  const lensAt = (frame: number) =>
    lensModel({
      einsteinRadiusArcsec: 1.2,
      axisRatio: 0.7,
      positionAngleDeg: 30 + 0.1 * frame,
      shear: { strength: 0.08, positionAngleDeg: 110 },
    })
  const times: number[] = []
  for (let frame = 0; frame < FRAMES; frame++) {
    const started = performance.now()
    const model = lensAt(frame)
    const source = { east: 0.05 + 1e-5 * frame, north: 0.02 }
    lensCurves(model)
    delayedImages(model, source, pointImages(model, source), 1)
    discOutlines(model, source, 0.1)
    times.push(performance.now() - started)
  }
  times.sort((a, b) => a - b)
  const micro = (share: number) => Math.round(1000 * times[Math.floor(share * (FRAMES - 1))])
  const started = performance.now()
  arrivalTimeSurface(lensAt(0), { east: 0, north: 0 }, { east: 5, north: 5, stepArcsec: 0.1, columns: 100, rows: 100 })
  const surface = performance.now() - started
  const points = pointImages(lensAt(0), { east: 0.05, north: 0.02 })
  const began = performance.now()
  const held = { centre: { east: 0, north: 0 } }
  fitSie({ points, pointsAre: 'images', kind: 'ellipsoid', held, clickErrorArcsec: 0.05, pixelScaleArcsec: 0.2 })
  return [
    `lens: images, critical curve, caustic, cut and arcs of one frame: median ${micro(0.5)} µs, p99 ${micro(0.99)} µs`,
    `lens: arrival-time surface of 100 x 100: ${surface.toFixed(1)} ms; ellipsoid fitted to four images: ${duration(performance.now() - began)}`,
  ]
}
