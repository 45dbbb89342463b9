import type { SkyCone } from '@/lib/work/catalogue/table-input'
import { formatDeclination, formatRightAscension } from '@/lib/science/sky/coordinates'
import { positionAngleDeg, separationArcsec, type SkyPosition } from '@/lib/science/sky/separation'
import { readFilter } from './read-filter'
import { radiusInWords } from './sky-region'

const SIDE = 148
const HALF = SIDE / 2
const RIM = HALF - 10
const LEAST_REACH_ARCSEC = 5

interface RegionPlotProps {
  /** Of the rows of this page. */
  positions: readonly SkyPosition[]
  cone: SkyCone | null
  /** The filters of right ascension and declination, as typed. */
  ra: string
  dec: string
}

/**
 * Where the rows of this page lie, and the region that was asked for: north up, east to the left, distances from the middle true
 * (zenithal equidistant, ARC in Calabretta & Greisen 2002, section 5.1.5).
 */
export function RegionPlot({ positions, cone, ra, dec }: RegionPlotProps) {
  const middle = cone ?? middleOf(positions)
  if (!middle) return null
  const farthest = positions.reduce((most, one) => Math.max(most, separationArcsec(middle, one)), LEAST_REACH_ARCSEC)
  const reach = cone ? cone.radiusArcsec * 1.15 : farthest
  const place = (at: SkyPosition): [number, number] => {
    const radius = (separationArcsec(middle, at) / reach) * RIM
    const angle = (positionAngleDeg(middle, at) * Math.PI) / 180
    return [HALF - radius * Math.sin(angle), HALF - radius * Math.cos(angle)]
  }
  const words = cone
    ? `within ${radiusInWords(cone.radiusArcsec)} of ${formatRightAscension(cone.raDeg, 1)} ${formatDeclination(cone.decDeg, 0)}`
    : `${radiusInWords(reach)} round ${formatRightAscension(middle.raDeg, 0)} ${formatDeclination(middle.decDeg, 0)}`
  const count = `${positions.length} ${positions.length === 1 ? 'row' : 'rows'} of this page`
  return (
    <figure className="m-0 flex w-[148px] shrink-0 flex-col gap-1">
      <svg
        viewBox={`0 0 ${SIDE} ${SIDE}`}
        width={SIDE}
        height={SIDE}
        role="img"
        aria-label={`Sky plot: ${count}, ${words}. North is up, east to the left.`}
        className="rounded-tray border border-line bg-page"
      >
        <path d={`M${HALF} 4V${SIDE - 4}M4 ${HALF}H${SIDE - 4}`} stroke="var(--line)" fill="none" />
        <circle cx={HALF} cy={HALF} r={RIM} fill="none" stroke="var(--line)" />
        {outlines(ra, dec).map((line, at) => (
          <path key={at} d={pathOf(line, place)} fill="none" stroke="var(--lamp)" strokeDasharray="4 3" />
        ))}
        {cone ? (
          <circle
            cx={HALF}
            cy={HALF}
            r={(cone.radiusArcsec / reach) * RIM}
            fill="none"
            stroke="var(--lamp)"
            strokeWidth={1.5}
          />
        ) : null}
        {positions.map((at, index) => {
          const [x, y] = place(at)
          return <circle key={index} cx={x} cy={y} r={1.6} fill="var(--text)" />
        })}
        <text x={HALF + 4} y={12} fontSize={9} fill="var(--mute)">
          N
        </text>
        <text x={5} y={HALF - 4} fontSize={9} fill="var(--mute)">
          E
        </text>
      </svg>
      <figcaption className="text-note text-mute">
        <span className="block">{count}</span>
        <span className="figures block">{words}</span>
      </figcaption>
    </figure>
  )
}

/** The direction of the sum of the unit vectors; null for no positions, or where they cancel. */
export function middleOf(positions: readonly SkyPosition[]): SkyPosition | null {
  let [x, y, z] = [0, 0, 0]
  for (const { raDeg, decDeg } of positions) {
    const [ra, dec] = [(raDeg * Math.PI) / 180, (decDeg * Math.PI) / 180]
    x += Math.cos(dec) * Math.cos(ra)
    y += Math.cos(dec) * Math.sin(ra)
    z += Math.sin(dec)
  }
  if (Math.hypot(x, y, z) < 1e-9 * Math.max(1, positions.length)) return null
  return {
    raDeg: ((Math.atan2(y, x) * 180) / Math.PI + 360) % 360,
    decDeg: (Math.atan2(z, Math.hypot(x, y)) * 180) / Math.PI,
  }
}

const STEPS = 48

/** The edges of the box that the two ranges make. */
function outlines(ra: string, dec: string): SkyPosition[][] {
  const [raRead, decRead] = [readFilter('ra', ra), readFilter('dec', dec)]
  const raEnds = raRead && 'condition' in raRead ? endsOf(raRead.condition) : null
  const decEnds = decRead && 'condition' in decRead ? endsOf(decRead.condition) : null
  if (!raEnds && !decEnds) return []
  const [west, east] = raEnds ?? [0, 360]
  const width = east >= west ? east - west : east + 360 - west
  const [south, north] = decEnds ?? [-90, 90]
  const along = (share: number) => share / STEPS
  const steps = Array.from({ length: STEPS + 1 }, (_, step) => step)
  const lines: SkyPosition[][] = []
  if (raEnds) {
    for (const raDeg of [west, west + width]) {
      lines.push(steps.map((step) => ({ raDeg, decDeg: south + (north - south) * along(step) })))
    }
  }
  if (decEnds) {
    for (const decDeg of [south, north])
      lines.push(steps.map((step) => ({ raDeg: west + width * along(step), decDeg })))
  }
  return lines
}

function endsOf(condition: { kind: string } & object): [number, number] | null {
  if ('from' in condition && 'to' in condition) return [Number(condition.from), Number(condition.to)]
  if ('least' in condition && 'most' in condition) return [Number(condition.least ?? -90), Number(condition.most ?? 90)]
  return null
}

/** Broken where it leaves the plot. */
function pathOf(line: readonly SkyPosition[], place: (at: SkyPosition) => [number, number]): string {
  let path = ''
  let drawn = false
  for (const at of line) {
    const [x, y] = place(at)
    const inside = x > -SIDE && x < 2 * SIDE && y > -SIDE && y < 2 * SIDE
    if (inside) path += `${drawn ? 'L' : 'M'}${x.toFixed(1)} ${y.toFixed(1)}`
    drawn = inside
  }
  return path
}
