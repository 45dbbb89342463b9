/** Galaxies that fool people: spirals, rings, mergers, edge-on discs, and plain ellipticals with neighbours. */
import { sersicBrightness } from '../sersic'
import type { SeededRandom } from '../seeded-random'
import {
  distantBlueColour,
  magnitudesOf,
  OLD_BULGE,
  OLD_DISC,
  quiescentColour,
  YOUNG_DISC,
  YOUNG_RING,
  YOUNG_STARS,
  type Colour,
} from './colours'
import { addElliptical } from './lens-scenes'
import type { Brightness, Scene } from './scene'

interface Blob {
  x: number
  y: number
  /** Standard deviation, arcsec. */
  size: number
  weight: number
}

/** Sum of round Gaussians; far ones cost nothing. */
function blobs(list: Blob[]): Brightness {
  return (x, y) => {
    let sum = 0
    for (const { x: x0, y: y0, size, weight } of list) {
      const square = ((x - x0) ** 2 + (y - y0) ** 2) / (2 * size * size)
      if (square < 16) sum += (weight / (2 * Math.PI * size * size)) * Math.exp(-square)
    }
    return sum
  }
}

/** Coordinates in the plane of an inclined disc: polar radius and angle. */
function discFrame(axisRatio: number, positionAngle: number, x0: number, y0: number) {
  const sin = Math.sin(positionAngle)
  const cos = Math.cos(positionAngle)
  return (x: number, y: number): [number, number] => {
    const along = (x - x0) * cos + (y - y0) * sin
    const across = ((y - y0) * cos - (x - x0) * sin) / axisRatio
    return [Math.sqrt(along * along + across * across), Math.atan2(across, along)]
  }
}

/** The point of the sky at a polar position in that disc. */
function onSky(axisRatio: number, positionAngle: number, radius: number, angle: number): { x: number; y: number } {
  const along = radius * Math.cos(angle)
  const across = radius * Math.sin(angle) * axisRatio
  const sin = Math.sin(positionAngle)
  const cos = Math.cos(positionAngle)
  return { x: along * cos - across * sin, y: along * sin + across * cos }
}

/** Magnitude of a part of the light. */
const share = (magnitude: number, fraction: number): number => magnitude - 2.5 * Math.log10(fraction)

const paint = (scene: Scene, magnitude: number, colour: Colour) => magnitudesOf(scene.survey, magnitude, colour)

function bulge(radius: number, index: number, axisRatio: number, x = 0, y = 0): Brightness {
  return sersicBrightness({ effectiveRadiusArcsec: radius, index, axisRatio, positionAngleDeg: 0, x, y })
}

export function composeSpiral(scene: Scene, random: SeededRandom): void {
  const magnitude = random.between(17.6, 19.8)
  const scale = random.between(0.85, 1.5)
  const axisRatio = random.between(0.65, 1)
  const turn = random.between(0, 2 * Math.PI)
  const arms = random.chance(0.75) ? 2 : random.integer(3, 4)
  const pitch = Math.tan((random.between(13, 26) * Math.PI) / 180) * (random.chance(0.5) ? 1 : -1)
  const sharpness = random.between(2.5, 6)
  const frame = discFrame(axisRatio, turn, 0, 0)
  const bulgeShare = random.between(0.15, 0.4)
  const armPhase = (r: number, angle: number) => arms * (angle - Math.log(Math.max(r, 0.05) / scale) / pitch)
  const arm: Brightness = (x, y) => {
    const [r, angle] = frame(x, y)
    const crest = Math.exp(sharpness * (Math.cos(armPhase(r, angle)) - 1))
    return crest * Math.exp(-r / (1.15 * scale)) * (1 - Math.exp(-((r / (0.6 * scale)) ** 2)))
  }
  scene.add(
    bulge(random.between(0.22, 0.42), random.between(1.5, 3), 0.9),
    paint(scene, share(magnitude, bulgeShare), OLD_BULGE),
    { fine: 10 },
  )
  scene.addScaled(
    (x, y) => Math.exp(-frame(x, y)[0] / scale),
    paint(scene, share(magnitude, 0.5 * (1 - bulgeShare)), OLD_DISC),
  )
  scene.addScaled(arm, paint(scene, share(magnitude, 0.34 * (1 - bulgeShare)), YOUNG_DISC), {
    fine: 3,
    fineRadiusArcsec: 3,
  })
  const knots = Array.from({ length: random.integer(8, 18) }, () => {
    const r = scale * random.between(0.8, 2.9)
    const angle =
      Math.log(r / scale) / pitch + (2 * Math.PI * random.integer(0, arms - 1)) / arms + 0.12 * random.normal()
    return { ...onSky(axisRatio, turn, r, angle), size: random.between(0.08, 0.16), weight: random.between(0.3, 1) }
  })
  scene.addScaled(blobs(knots), paint(scene, share(magnitude, 0.16 * (1 - bulgeShare)), YOUNG_STARS), {
    fine: 3,
    fineRadiusArcsec: 4,
  })
}

export function composeRingGalaxy(scene: Scene, random: SeededRandom): void {
  const magnitude = random.between(18.0, 20.0)
  const radius = random.between(1.5, 2.8)
  const width = random.between(0.12, 0.26)
  const axisRatio = random.between(0.6, 1)
  const turn = random.between(0, 2 * Math.PI)
  const offset = onSky(axisRatio, turn, random.between(0, 0.25) * radius, random.between(0, 2 * Math.PI))
  const frame = discFrame(axisRatio, turn, offset.x, offset.y)
  const bright = random.between(0, 2 * Math.PI)
  const contrast = random.between(0.1, 0.6)
  const ring: Brightness = (x, y) => {
    const [r, angle] = frame(x, y)
    return Math.exp(-(((r - radius) / width) ** 2) / 2) * (1 + contrast * Math.cos(angle - bright))
  }
  const core = quiescentColour(random.between(0.15, 0.38))
  const coreShare = random.between(0.4, 0.62)
  scene.add(
    bulge(random.between(0.35, 0.7), random.between(2, 4), random.between(0.75, 1)),
    paint(scene, share(magnitude, coreShare), core),
    { fine: 10 },
  )
  scene.addScaled((x, y) => Math.exp((-2.2 * frame(x, y)[0]) / radius), paint(scene, share(magnitude, 0.08), OLD_DISC))
  const ringMagnitude = share(magnitude, 0.92 - coreShare)
  scene.addScaled(ring, paint(scene, share(ringMagnitude, 0.72), YOUNG_RING), { fine: 3, fineRadiusArcsec: 3.5 })
  const knots = Array.from({ length: random.integer(4, 12) }, () => {
    const at = onSky(axisRatio, turn, radius + 0.3 * width * random.normal(), random.between(0, 2 * Math.PI))
    return { x: at.x + offset.x, y: at.y + offset.y, size: random.between(0.1, 0.18), weight: random.between(0.3, 1) }
  })
  scene.addScaled(blobs(knots), paint(scene, share(ringMagnitude, 0.28), YOUNG_STARS), {
    fine: 3,
    fineRadiusArcsec: 3.5,
  })
}

export function composeMerger(scene: Scene, random: SeededRandom): void {
  const magnitude = random.between(17.8, 19.8)
  const separation = random.between(0.9, 2.4)
  const direction = random.between(0, 2 * Math.PI)
  const first = { x: -0.4 * separation * Math.cos(direction), y: -0.4 * separation * Math.sin(direction) }
  const second = { x: 0.6 * separation * Math.cos(direction), y: 0.6 * separation * Math.sin(direction) }
  const redder = quiescentColour(random.between(0.1, 0.35))
  const galaxies = [
    { at: first, part: 0.5, colour: redder },
    { at: second, part: random.between(0.15, 0.3), colour: random.chance(0.5) ? redder : OLD_DISC },
  ]
  for (const { at, part, colour } of galaxies) {
    const brightness = sersicBrightness({
      effectiveRadiusArcsec: random.between(0.35, 0.75),
      index: random.between(1.5, 3.5),
      axisRatio: random.between(0.5, 0.95),
      positionAngleDeg: random.between(0, 180),
      ...at,
    })
    scene.add(brightness, paint(scene, share(magnitude, part), colour), { ...at, fine: 8 })
  }
  // Light pulled out of both, as wide smooth debris and one or two tails bending the same way round.
  scene.add(bulge(1.6, 1, random.between(0.5, 0.9)), paint(scene, share(magnitude, 0.1), OLD_DISC))
  const handed = random.chance(0.5) ? 1 : -1
  const tails = [tail(first, direction + Math.PI, handed, random), tail(second, direction, handed, random)]
  const wanted = random.chance(0.65) ? tails : [tails[0]]
  scene.addScaled(blobs(wanted.flat()), paint(scene, share(magnitude, random.between(0.08, 0.18)), YOUNG_DISC), {
    fine: 2,
    fineRadiusArcsec: 4,
  })
}

/** A tail leaves its galaxy outwards and curls round: many small blobs that widen and fade along it. */
function tail(start: { x: number; y: number }, outwards: number, handed: number, random: SeededRandom): Blob[] {
  const steps = 44
  const length = random.between(3.2, 6)
  const curl = handed * random.between(0.5, 1)
  let { x, y } = start
  let heading = outwards - handed * random.between(0.6, 1.2)
  return Array.from({ length: steps }, (_, k) => {
    const along = k / steps
    heading += (curl * 3.2) / steps
    x += (Math.cos(heading) * length) / steps
    y += (Math.sin(heading) * length) / steps
    return { x, y, size: 0.14 + 0.22 * along, weight: Math.min(1, 5 * along) * Math.exp(-1.9 * along) }
  })
}

export function composeEdgeOn(scene: Scene, random: SeededRandom): void {
  const lensLike = random.chance(0.45)
  const angle = random.between(0, Math.PI)
  const away = lensLike ? random.between(1.5, 2.6) : 0
  const centre = { x: -away * Math.sin(angle), y: away * Math.cos(angle) }
  const magnitude = lensLike ? random.between(20, 21.5) : random.between(17.8, 19.6)
  const length = lensLike ? random.between(0.45, 0.8) : random.between(0.9, 1.7)
  const height = lensLike ? 0.1 : random.between(0.12, 0.22)
  const sin = Math.sin(angle)
  const cos = Math.cos(angle)
  const bend = lensLike ? random.between(-0.05, 0.12) : random.between(-0.02, 0.02)
  const disc =
    (thickness: number, lane: number): Brightness =>
    (x, y) => {
      const along = (x - centre.x) * cos + (y - centre.y) * sin
      const above = (y - centre.y) * cos - (x - centre.x) * sin + bend * along * along
      const sech = 1 / Math.cosh(above / thickness)
      const dust = 1 - lane * Math.exp(-(((above - 0.03) / (0.45 * thickness)) ** 2))
      return sech * sech * Math.exp(-Math.abs(along) / length) * dust
    }
  const sampling = { ...centre, fine: 4, fineRadiusArcsec: 3 }
  const bulgeShare = lensLike ? 0.08 : random.between(0.12, 0.3)
  const young = lensLike ? YOUNG_DISC : { gMinusR: 0.6, rMinusI: 0.35 }
  scene.addScaled(disc(height, 0.55), paint(scene, share(magnitude, 0.5 * (1 - bulgeShare)), young), sampling)
  scene.addScaled(disc(1.8 * height, 0.3), paint(scene, share(magnitude, 0.5 * (1 - bulgeShare)), OLD_DISC), sampling)
  scene.add(bulge(0.35, 2, 0.75, centre.x, centre.y), paint(scene, share(magnitude, bulgeShare), OLD_BULGE), {
    ...centre,
    fine: 8,
  })
  if (lensLike) composeElliptical(scene, random, false)
}

/** A red galaxy in the middle; with `companions`, others near it that may be taken for images. */
export function composeElliptical(scene: Scene, random: SeededRandom, companions = true): void {
  const redshift = random.between(0.2, 0.6)
  const magnitude = 18.2 + 4.5 * (redshift - 0.2) + 0.35 * random.normal()
  const colour = quiescentColour(redshift)
  const main = { axisRatio: random.between(0.5, 1), positionAngleDeg: random.between(0, 180), redshift, colour }
  addElliptical(scene, { x: random.between(-0.1, 0.1), y: random.between(-0.1, 0.1), magnitude, ...main }, random)
  if (!companions) return
  const count = random.integer(0, 2)
  for (let k = 0; k < count; k++) {
    const distance = random.between(1.4, 3.2)
    const angle = random.between(0, 2 * Math.PI)
    const at = { x: distance * Math.cos(angle), y: distance * Math.sin(angle) }
    if (random.chance(0.5)) {
      const axisRatio = random.between(0.6, 1)
      addElliptical(scene, { ...main, ...at, magnitude: magnitude + random.between(1.5, 3.5), axisRatio }, random)
    } else {
      const brightness = bulge(random.between(0.15, 0.35), 1, random.between(0.5, 1), at.x, at.y)
      scene.add(brightness, paint(scene, random.between(21.8, 23.8), distantBlueColour(random)), { ...at, fine: 6 })
    }
  }
}
