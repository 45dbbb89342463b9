/** Where a calibration stamp is said to lie: like the candidates of its survey, as far from the nearest, with as many digits. Pure. */
import { separationArcsec, type SkyPosition } from '@/lib/science/sky/separation'
import type { SeededRandom } from '@/lib/science/lensing/seeded-random'

/** Where there is nobody to be near to. */
const USUAL_DEG = 300 / 3600
/** Nearer, a stamp and a candidate might be taken for duplicates. */
const LEAST_DEG = 60 / 3600

/**
 * Near a candidate that is drawn, at the distance from which another that is drawn has its nearest, or somewhat less.
 * @param candidates positions of the campaign, or a sample of them. @param digits of degrees, right ascension and declination.
 */
export function placeLike(
  candidates: readonly SkyPosition[],
  digits: { ra: number; dec: number },
  random: SeededRandom,
): SkyPosition | null {
  if (candidates.length === 0) return null
  const beside = candidates[random.integer(0, candidates.length - 1)]
  const like = candidates[random.integer(0, candidates.length - 1)]
  const nearest = candidates.reduce(
    (least, other) => (other === like ? least : Math.min(least, separationArcsec(like, other) / 3600)),
    Number.POSITIVE_INFINITY,
  )
  const apart = Number.isFinite(nearest) ? nearest : USUAL_DEG
  const distance = Math.max(LEAST_DEG, apart * random.between(0.5, 1))
  const angle = random.between(0, 2 * Math.PI)
  const north = beside.decDeg + distance * Math.cos(angle)
  const decDeg = Math.abs(north) > 89.9 ? beside.decDeg : north
  const raDeg = beside.raDeg + (distance * Math.sin(angle)) / Math.max(0.01, Math.cos((decDeg * Math.PI) / 180))
  const rounded = Number((((raDeg % 360) + 360) % 360).toFixed(digits.ra))
  return { raDeg: rounded >= 360 ? 0 : rounded, decDeg: Number(decDeg.toFixed(digits.dec)) }
}

/** Digits behind the point with which a number of degrees was told; at least enough for an arcsecond. */
export function digitsOf(degrees: number): number {
  const [, behind = ''] = String(degrees).split('.')
  return Math.min(15, Math.max(4, behind.length))
}
