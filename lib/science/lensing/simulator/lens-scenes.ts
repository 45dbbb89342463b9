/**
 * The five kinds of lens: a Sersic source traced through ellipsoids and shear, behind the light of the lens galaxies.
 */
import { sersicBrightness } from '../sersic'
import { sieDeflector, type EllipsoidLens } from '../sie'
import type { SeededRandom } from '../seeded-random'
import { distantBlueColour, magnitudesOf, quiescentColour, type Colour } from './colours'
import type { LensKind } from './kinds'
import type { Brightness, Scene } from './scene'

/** Ranges of each kind. Offsets of the source in units of the Einstein radius. */
interface LensRecipe {
  einsteinRadius: [number, number]
  sourceOffset: [number, number]
  sourceRadius: [number, number]
  sourceMagnitude: [number, number]
  axisRatio: [number, number]
}

const RECIPES: Record<LensKind, LensRecipe> = {
  'lens-arc': {
    einsteinRadius: [1.2, 2.6],
    sourceOffset: [0.14, 0.4],
    sourceRadius: [0.15, 0.36],
    sourceMagnitude: [22.8, 25.0],
    axisRatio: [0.65, 0.95],
  },
  'lens-ring': {
    einsteinRadius: [1.0, 2.0],
    sourceOffset: [0, 0.07],
    sourceRadius: [0.14, 0.32],
    sourceMagnitude: [23.4, 25.2],
    axisRatio: [0.75, 0.97],
  },
  'lens-quad': {
    einsteinRadius: [0.95, 1.7],
    sourceOffset: [0.02, 0.13],
    sourceRadius: [0.03, 0.06],
    sourceMagnitude: [23.2, 24.8],
    axisRatio: [0.55, 0.75],
  },
  'lens-double': {
    einsteinRadius: [0.95, 1.9],
    sourceOffset: [0.3, 0.6],
    sourceRadius: [0.03, 0.08],
    sourceMagnitude: [21.8, 23.8],
    axisRatio: [0.7, 0.95],
  },
  'lens-group': {
    einsteinRadius: [2.8, 4.6],
    sourceOffset: [0.1, 0.32],
    sourceRadius: [0.18, 0.4],
    sourceMagnitude: [22.6, 24.6],
    axisRatio: [0.6, 0.9],
  },
}

interface Shear {
  gamma1: number
  gamma2: number
}

/** Fills the scene and returns the Einstein radius of the main lens, arcsec. */
export function composeLens(kind: LensKind, scene: Scene, random: SeededRandom): number {
  const recipe = RECIPES[kind]
  const { survey } = scene
  const redshift = random.between(0.25, 0.68)
  const einsteinRadiusArcsec = random.between(...recipe.einsteinRadius)
  const axisRatio = random.between(...recipe.axisRatio)
  const positionAngleDeg = random.between(0, 180)
  const colour = quiescentColour(redshift)
  const pixel = survey.pixelScaleArcsec
  const x = random.between(-0.5, 0.5) * pixel
  const y = random.between(-0.5, 0.5) * pixel

  const magnitude = lensMagnitude(redshift, einsteinRadiusArcsec, random)
  addElliptical(scene, { x, y, magnitude, axisRatio, positionAngleDeg, redshift, colour }, random)
  const lenses: EllipsoidLens[] = [
    {
      einsteinRadiusArcsec,
      axisRatio: Math.min(1, axisRatio + random.between(0, 0.12)),
      positionAngleDeg: positionAngleDeg + 6 * random.normal(),
      centre: { east: x, north: y },
    },
  ]
  if (kind === 'lens-group') lenses.push(...addMembers(scene, einsteinRadiusArcsec, magnitude, redshift, random))

  const shearStrength = random.between(0, 0.06)
  const shearAngle = random.between(0, 2 * Math.PI)
  const shear = { gamma1: shearStrength * Math.cos(shearAngle), gamma2: shearStrength * Math.sin(shearAngle) }
  const offset = einsteinRadiusArcsec * random.between(...recipe.sourceOffset)
  const direction = random.between(0, 2 * Math.PI)
  const source = sourceBrightness(
    kind,
    x + offset * Math.cos(direction),
    y + offset * Math.sin(direction),
    recipe,
    random,
  )
  const reach = 2 * einsteinRadiusArcsec + 4 * recipe.sourceRadius[1]
  const sourceColour = random.chance(0.12) ? { gMinusR: 0.8, rMinusI: 0.5 } : distantBlueColour(random)
  scene.add(
    traced(source, lenses, shear, x, y),
    magnitudesOf(survey, random.between(...recipe.sourceMagnitude), sourceColour),
    { x, y, fine: kind === 'lens-quad' || kind === 'lens-double' ? 6 : 4, fineRadiusArcsec: reach, isLensed: true },
  )
  return einsteinRadiusArcsec
}

/** Surface brightness is conserved: the image shows at theta what the source has at theta - alpha(theta). */
export function traced(
  source: Brightness,
  lenses: EllipsoidLens[],
  { gamma1, gamma2 }: Shear,
  centreX: number,
  centreY: number,
): Brightness {
  const deflectors = lenses.map(sieDeflector)
  return (x, y) => {
    const dx = x - centreX
    const dy = y - centreY
    let sourceX = x - gamma1 * dx - gamma2 * dy
    let sourceY = y - gamma2 * dx + gamma1 * dy
    for (const deflect of deflectors) {
      const { east, north } = deflect(x, y)
      sourceX -= east
      sourceY -= north
    }
    return source(sourceX, sourceY)
  }
}

function sourceBrightness(
  kind: LensKind,
  x: number,
  y: number,
  { sourceRadius }: LensRecipe,
  random: SeededRandom,
): Brightness {
  const radius = random.between(...sourceRadius)
  const compact = kind === 'lens-quad' || kind === 'lens-double'
  const main = sersicBrightness({
    effectiveRadiusArcsec: radius,
    index: compact ? 1.5 : random.between(0.8, 1.6),
    axisRatio: compact ? 1 : random.between(0.45, 1),
    positionAngleDeg: random.between(0, 180),
    x,
    y,
  })
  if (compact) return main
  const clumps = Array.from({ length: random.integer(0, 3) }, () => ({
    brightness: sersicBrightness({
      effectiveRadiusArcsec: random.between(0.03, 0.06),
      index: 1,
      axisRatio: 1,
      positionAngleDeg: 0,
      x: x + 0.7 * radius * random.normal(),
      y: y + 0.7 * radius * random.normal(),
    }),
    share: random.between(0.04, 0.12),
  }))
  return (u, v) => clumps.reduce((sum, { brightness, share }) => sum + share * brightness(u, v), main(u, v))
}

/** Massive galaxies: i about 18 at z = 0.25 and 20 at 0.65, brighter as L ~ sigma^4 ~ theta_E^2, with scatter. */
function lensMagnitude(redshift: number, einsteinRadius: number, random: SeededRandom): number {
  const magnitude =
    18.3 + 5.2 * (redshift - 0.25) - 3 * Math.log10(Math.min(einsteinRadius, 2.6) / 1.3) + 0.3 * random.normal()
  return Math.min(20.8, Math.max(17.2, magnitude))
}

interface Elliptical {
  x: number
  y: number
  magnitude: number
  axisRatio: number
  positionAngleDeg: number
  redshift: number
  colour: Colour
}

/** A quiescent galaxy; its size follows its light (common practice, no source). */
export function addElliptical(scene: Scene, galaxy: Elliptical, random: SeededRandom): void {
  const radius = 0.95 * 10 ** (-0.14 * (galaxy.magnitude - 19)) * Math.exp(0.15 * random.normal())
  const brightness = sersicBrightness({
    effectiveRadiusArcsec: Math.min(2.6, Math.max(0.25, radius)),
    index: random.between(3, 5),
    axisRatio: galaxy.axisRatio,
    positionAngleDeg: galaxy.positionAngleDeg,
    x: galaxy.x,
    y: galaxy.y,
  })
  scene.add(brightness, magnitudesOf(scene.survey, galaxy.magnitude, galaxy.colour), {
    x: galaxy.x,
    y: galaxy.y,
    fine: 12,
    fineRadiusArcsec: 0.5,
  })
}

function addMembers(
  scene: Scene,
  einsteinRadius: number,
  magnitude: number,
  redshift: number,
  random: SeededRandom,
): EllipsoidLens[] {
  return Array.from({ length: random.integer(3, 5) }, () => {
    const distance = einsteinRadius * random.between(0.35, 1.8)
    const angle = random.between(0, 2 * Math.PI)
    const member = {
      x: distance * Math.cos(angle),
      y: distance * Math.sin(angle),
      magnitude: magnitude + random.between(0.8, 3),
      axisRatio: random.between(0.5, 1),
      positionAngleDeg: random.between(0, 180),
      redshift,
      colour: quiescentColour(redshift),
    }
    addElliptical(scene, member, random)
    return {
      einsteinRadiusArcsec: 0.6 * 10 ** (-0.2 * (member.magnitude - magnitude)),
      axisRatio: member.axisRatio,
      positionAngleDeg: member.positionAngleDeg,
      centre: { east: member.x, north: member.y },
    }
  })
}
