import { geoPath } from 'd3-geo'
import type { CellBounds } from '@/lib/science/sky/equal-area-grid'
import type { SkyPosition } from '@/lib/science/sky/separation'
import type { SkyExtent } from '@/lib/science/sky/sky-extent'
import { cellPath, densityStep } from './sky-marks'
import { skyGrid } from './sky-grid'
import { FRAME, HEIGHT, skyProjection, WIDTH } from './sky-projection'

export interface SkyPoint {
  key: string
  label: string
  class: 'A' | 'B' | 'C' | null
  raDeg: number
  decDeg: number
  href?: string
}

export type SkyMarks = { extent: SkyExtent | null; entries: number } & (
  | { kind: 'points'; points: readonly SkyPoint[] }
  | { kind: 'cells'; cells: readonly (CellBounds & { count: number })[]; cellAreaDeg2: number }
)

/** Up to so many points can be come to with Tab; beyond, the table is the way, and they stay links for the pointer. */
const MOST_TAB_STOPS = 40
const STEPS = 6
const FILLS = { A: 'var(--grade-a)', B: 'var(--grade-b)', C: 'var(--grade-c)' }

/**
 * Where entries lie on the sky, on an equal-area map drawn without script: each where they are few, how many per square degree where
 * they are many. North is up and right ascension grows to the left.
 */
export function SkyMap({ id, title, marks }: { id: string; title: string; marks: SkyMarks }) {
  const sky = skyProjection(marks.extent, placesOf(marks))
  const grid = skyGrid(sky)
  const path = geoPath(sky.projection).digits(1)
  const height = sky.wholeSky ? 222 : HEIGHT
  const isReachable = marks.kind === 'points' && marks.points.length <= MOST_TAB_STOPS
  return (
    <svg
      viewBox={`0 0 ${WIDTH} ${height}`}
      role={marks.kind === 'points' ? 'group' : 'img'}
      aria-labelledby={`${id}-title ${id}-desc`}
      fontSize="11"
      className="block h-auto w-full font-sans"
    >
      <title id={`${id}-title`}>{title}</title>
      <desc id={`${id}-desc`}>{skyInWords(marks)}</desc>
      {sky.wholeSky ? (
        <path d={path({ type: 'Sphere' }) ?? ''} fill="var(--well)" stroke="var(--edge)" />
      ) : (
        <rect
          x={FRAME.left}
          y={FRAME.top}
          width={FRAME.right - FRAME.left}
          height={FRAME.bottom - FRAME.top}
          fill="var(--well)"
          stroke="var(--edge)"
        />
      )}
      {marks.kind === 'cells' ? <Cells marks={marks} project={(cell) => cellPath(sky.projection, cell)} /> : null}
      <path d={grid.path} fill="none" stroke="var(--edge)" strokeOpacity="0.45" strokeWidth="0.6" />
      <g
        fill="var(--text)"
        stroke="var(--page)"
        strokeWidth="3"
        strokeLinejoin="round"
        paintOrder="stroke"
        aria-hidden="true"
      >
        {grid.ra.map(({ text, x, y }) => (
          <text key={`${text} ${x.toFixed(0)}`} x={x.toFixed(1)} y={y.toFixed(1)} textAnchor="middle">
            {text}
          </text>
        ))}
        {grid.dec.map(({ text, x, y }) => (
          <text
            key={`${text} ${y.toFixed(0)}`}
            x={x.toFixed(1)}
            y={y.toFixed(1)}
            dy={sky.wholeSky ? 0 : '0.35em'}
            textAnchor="end"
          >
            {text}
          </text>
        ))}
        {sky.wholeSky ? null : (
          <text x={(FRAME.left + FRAME.right) / 2} y={HEIGHT - 8} textAnchor="middle" fill="var(--text)">
            Right ascension (ICRS), hours; declination, degrees
          </text>
        )}
      </g>
      {marks.kind === 'points' ? (
        <g aria-hidden={isReachable ? undefined : true}>
          {marks.points.map((point) => {
            const place = sky.projection([point.raDeg, point.decDeg])
            return place ? <Point key={point.key} point={point} place={place} isReachable={isReachable} /> : null
          })}
        </g>
      ) : null}
    </svg>
  )
}

function Point({ point, place, isReachable }: { point: SkyPoint; place: [number, number]; isReachable: boolean }) {
  const [x, y] = place.map((value) => value.toFixed(1))
  const mark = (
    <circle
      cx={x}
      cy={y}
      r="3.6"
      fill={point.class ? FILLS[point.class] : 'var(--well)'}
      stroke="var(--text)"
      strokeWidth="0.9"
    />
  )
  if (!point.href) return mark
  return (
    <a href={point.href} tabIndex={isReachable ? undefined : -1} aria-label={isReachable ? point.label : undefined}>
      <title>{point.label}</title>
      <circle cx={x} cy={y} r="11" fill="transparent" />
      {mark}
    </a>
  )
}

function Cells({
  marks,
  project,
}: {
  marks: Extract<SkyMarks, { kind: 'cells' }>
  project: (cell: CellBounds) => string
}) {
  const most = marks.cells.reduce((largest, { count }) => Math.max(largest, count), 0)
  const byStep = Array.from({ length: STEPS }, (_, at) => at + 1).map((step) => ({
    step,
    path: marks.cells
      .filter(({ count }) => densityStep(count, most, STEPS) === step)
      .map(project)
      .join(''),
  }))
  return (
    <g>
      {byStep.map(({ step, path }) =>
        path ? (
          <path key={step} d={path} fill="var(--lamp)" fillOpacity={(0.12 + (0.88 * step) / STEPS).toFixed(2)} />
        ) : null,
      )}
    </g>
  )
}

function* placesOf(marks: SkyMarks): Generator<SkyPosition> {
  if (marks.kind === 'points') return yield* marks.points
  for (const { westRaDeg, eastRaDeg, southDecDeg, northDecDeg } of marks.cells) {
    yield { raDeg: westRaDeg, decDeg: southDecDeg }
    yield { raDeg: eastRaDeg, decDeg: northDecDeg }
  }
}

/** The map in a sentence, for who cannot see it. */
export function skyInWords(marks: SkyMarks): string {
  const { extent, entries } = marks
  if (entries === 0) return 'There are no entries to show.'
  const many = entries === 1 ? '1 entry' : `${entries.toLocaleString('en')} entries`
  const where = extent
    ? `within ${degrees(extent.radiusDeg)} of right ascension ${extent.centre.raDeg.toFixed(3)} and declination ${extent.centre.decDeg.toFixed(3)} degrees`
    : 'all round the sky'
  const how =
    marks.kind === 'points'
      ? 'Each is a dot, the brighter the surer.'
      : `Cells of ${significant(marks.cellAreaDeg2)} square degrees, the brighter the more entries.`
  return `${many}, ${where}. ${how} North is up, right ascension grows to the left.`
}

const significant = (value: number): string => Number(value.toPrecision(2)).toString()
const degrees = (value: number): string =>
  value < 1 / 60
    ? 'an arcminute'
    : value < 1
      ? `${significant(value * 60)} arcminutes`
      : `${significant(value)} degrees`
