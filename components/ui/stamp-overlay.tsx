import { scaleBar, type StampGeometry } from '@/lib/science/imaging/stamp-geometry'

/** End of an arrow of the given length in SVG axes (y down) at an angle counter-clockwise from up. */
function tip(angleDeg: number, length: number): { x: number; y: number } {
  const angle = (angleDeg * Math.PI) / 180
  return { x: -Math.sin(angle) * length, y: -Math.cos(angle) * length }
}

function Arrow({ angleDeg, label }: { angleDeg: number; label: string }) {
  const end = tip(angleDeg, 8)
  const text = tip(angleDeg, 11.5)
  return (
    <>
      <path d={`M0 0L${end.x} ${end.y}`} vectorEffect="non-scaling-stroke" />
      <text x={text.x} y={text.y} dominantBaseline="central" textAnchor="middle" fill="currentColor" stroke="none">
        {label}
      </text>
    </>
  )
}

/** Scale bar and compass over a picture in a square box. The picture is fitted inside, so the bar follows its longer side. */
export function StampOverlay({ width, height, geometry }: { width: number; height: number; geometry: StampGeometry }) {
  const longer = Math.max(width, height)
  const bar = geometry.pixelScaleArcsec ? scaleBar(longer, geometry.pixelScaleArcsec) : null
  const north = geometry.northAngleDeg
  const length = bar ? bar.fraction * 100 : 0
  const label = bar ? (bar.arcsec >= 60 ? `${bar.arcsec / 60}′` : `${bar.arcsec}″`) : ''
  return (
    <svg
      viewBox="0 0 100 100"
      className="pointer-events-none absolute inset-0 size-full text-white"
      fill="none"
      stroke="currentColor"
      strokeWidth="1.5"
      fontSize="3.2"
      aria-hidden="true"
      style={{ filter: 'drop-shadow(0 0 1px rgb(0 0 0 / 0.9))' }}
    >
      {bar ? (
        <g>
          <path d={`M4 95.5H${4 + length}M4 94.5V96.5M${4 + length} 94.5V96.5`} vectorEffect="non-scaling-stroke" />
          <text x="4" y="92.6" fill="currentColor" stroke="none">
            {label}
          </text>
        </g>
      ) : null}
      {north === null ? null : (
        <g transform="translate(86 86)">
          <Arrow angleDeg={north} label="N" />
          <Arrow angleDeg={north + (geometry.eastLeft ? 90 : -90)} label="E" />
        </g>
      )}
    </svg>
  )
}
