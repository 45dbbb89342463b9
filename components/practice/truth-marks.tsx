import type { PracticeTruth } from '@/lib/work/calibration/practice'
import type { StampGeometry } from '@/lib/science/imaging/stamp-geometry'

/**
 * Where painted light lies, drawn over the picture: an outline round each stretch of it. The box is square and the picture fitted
 * inside, so a hundredth of the box is a hundredth of the picture's longer side.
 */
export function TruthMarks({
  marks,
  side,
  geometry,
  scale = 1,
}: {
  marks: NonNullable<PracticeTruth['marks']>
  /** Pixels of the picture's longer side. */
  side: number
  geometry: StampGeometry
  /** How far the picture is drawn larger than its box. */
  scale?: number
}) {
  const { pixelScaleArcsec, northAngleDeg, eastLeft } = geometry
  if (pixelScaleArcsec === null) return null
  const perArcsec = (100 * scale) / (side * pixelScaleArcsec)
  const north = ((northAngleDeg ?? 0) * Math.PI) / 180
  const turn = eastLeft ? 1 : -1
  const middle = placeOf(marks.middle.east, marks.middle.north)

  /** Axes of the drawing, y down, from an offset on the sky. North lies counter-clockwise from up, east a quarter on from it. */
  function placeOf(east: number, northArcsec: number): [number, number] {
    const [upX, upY] = [-Math.sin(north), -Math.cos(north)]
    const [eastX, eastY] = [-Math.sin(north + (turn * Math.PI) / 2), -Math.cos(north + (turn * Math.PI) / 2)]
    return [50 + perArcsec * (northArcsec * upX + east * eastX), 50 + perArcsec * (northArcsec * upY + east * eastY)]
  }
  const at = (angleDeg: number, radius: number): [number, number] => {
    const angle = (angleDeg * Math.PI) / 180
    return placeOf(marks.middle.east + radius * Math.sin(angle), marks.middle.north + radius * Math.cos(angle))
  }
  const line = (points: [number, number][]) => points.map(([x, y]) => `${x.toFixed(2)} ${y.toFixed(2)}`).join('L')

  return (
    <svg
      viewBox="0 0 100 100"
      role="img"
      aria-label="Marks round the painted light"
      className="pointer-events-none absolute inset-0 size-full text-lamp"
      fill="none"
      stroke="currentColor"
      strokeWidth="1.5"
    >
      {marks.arcs.map(({ rays, lengthDeg, positionAngleDeg }) => {
        const outer = rays.map((ray) => at(ray.positionAngleDeg, ray.outerArcsec + MARGIN_ARCSEC))
        const inner = rays.map((ray) => at(ray.positionAngleDeg, Math.max(0, ray.innerArcsec - MARGIN_ARCSEC)))
        const path =
          lengthDeg >= 360 ? `M${line(outer)}ZM${line(inner)}Z` : `M${line([...outer, ...inner.toReversed()])}Z`
        return (
          <g key={positionAngleDeg}>
            {/* Dark below, so that the line is seen on a bright core too. */}
            <path d={path} vectorEffect="non-scaling-stroke" stroke="black" strokeWidth="3.5" strokeOpacity="0.7" />
            <path d={path} vectorEffect="non-scaling-stroke" strokeDasharray="4 3" />
          </g>
        )
      })}
      <path
        d={`M${middle[0] - 1.2} ${middle[1]}h2.4M${middle[0]} ${middle[1] - 1.2}v2.4`}
        vectorEffect="non-scaling-stroke"
      />
    </svg>
  )
}

/** Between the light and the line round it. */
const MARGIN_ARCSEC = 0.15
