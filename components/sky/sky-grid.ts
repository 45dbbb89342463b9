import { geoPath, type GeoProjection } from 'd3-geo'
import { FRAME, type SkyProjection } from './sky-projection'

export interface GridLabel {
  text: string
  x: number
  y: number
}

export interface SkyGridLines {
  path: string
  ra: GridLabel[]
  dec: GridLabel[]
}

/** Whole numbers of hours, minutes and seconds of right ascension, in degrees. */
const RA_STEPS = [60, 30, 15, 7.5, 5, 2.5, 1.25, 0.5, 0.25, 0.125, 1 / 12, 1 / 24, 1 / 48, 1 / 120]
const DEC_STEPS = [30, 20, 10, 5, 2, 1, 0.5, 0.25, 1 / 6, 1 / 12, 1 / 30, 1 / 60]
const LINES_ACROSS = 5
const SAMPLES = 240

const step = (steps: readonly number[], spanDeg: number): number =>
  steps.find((one) => spanDeg / one >= LINES_ACROSS - 1.5) ?? steps[steps.length - 1]

/** Lines of equal right ascension and declination, with their labels where they leave the frame. */
export function skyGrid(sky: SkyProjection): SkyGridLines {
  return sky.wholeSky ? wholeGrid(sky) : regionGrid(sky)
}

interface Line {
  at: number
  coordinates: [number, number][]
}

function lines(raValues: number[], decValues: number[], raRange: [number, number], decRange: [number, number]) {
  const ra = raValues.map((at): Line => ({ at, coordinates: sample((t) => [at, between(decRange, t)]) }))
  const dec = decValues.map((at): Line => ({ at, coordinates: sample((t) => [between(raRange, t), at]) }))
  return { ra, dec }
}

const between = ([from, to]: [number, number], t: number) => from + (to - from) * t
const sample = (at: (t: number) => [number, number]) =>
  Array.from({ length: SAMPLES + 1 }, (_, k): [number, number] => at(k / SAMPLES))

function pathOf(projection: GeoProjection, all: readonly Line[]): string {
  const coordinates = all.map((line) => line.coordinates)
  return geoPath(projection).digits(1)({ type: 'MultiLineString', coordinates }) ?? ''
}

function wholeGrid({ projection, centre }: SkyProjection): SkyGridLines {
  const raValues = Array.from({ length: 12 }, (_, k) => k * 30)
  const decValues = [-60, -30, 0, 30, 60]
  const { ra, dec } = lines(raValues, decValues, [centre.raDeg - 179.99, centre.raDeg + 179.99], [-89.9, 89.9])
  const place = (raDeg: number, decDeg: number) => projection([raDeg, decDeg]) ?? [Number.NaN, Number.NaN]
  const shown = raValues.filter((at) => at % 60 === 0 && Math.abs(((at - centre.raDeg + 540) % 360) - 180) < 170)
  return {
    path: pathOf(projection, [...ra, ...dec]),
    ra: shown.map((at) => {
      const [x, y] = place(at, 0)
      return { text: raText(at, 60), x, y: y + 12 }
    }),
    dec: decValues
      .filter((at) => at !== 0)
      .map((at) => {
        const [x, y] = place(centre.raDeg + 179.99, at)
        return { text: decText(at, 30), x: x - 4, y: y + (at > 0 ? -3 : 9) }
      }),
  }
}

function regionGrid({ projection, centre, reachDeg }: SkyProjection): SkyGridLines {
  const wide = (FRAME.right - FRAME.left) / (FRAME.bottom - FRAME.top)
  const north = Math.min(89.999, centre.decDeg + reachDeg * 1.8)
  const south = Math.max(-89.999, centre.decDeg - reachDeg * 1.8)
  const hasPole = Math.abs(centre.decDeg) + reachDeg * wide >= 89
  const stretch = Math.cos((Math.min(85, Math.max(Math.abs(north), Math.abs(south))) * Math.PI) / 180)
  const halfRa = hasPole ? 180 : Math.min(180, (reachDeg * wide * 1.3) / stretch)
  const raSpan = hasPole ? 360 : (2 * reachDeg * wide) / Math.cos((centre.decDeg * Math.PI) / 180)
  const raStep = hasPole ? 30 : step(RA_STEPS, raSpan)
  const decStep = step(DEC_STEPS, 2 * reachDeg)
  const raRange: [number, number] = [centre.raDeg - halfRa, centre.raDeg + halfRa]
  const { ra, dec } = lines(multiples(raRange, raStep), multiples([south, north], decStep), raRange, [south, north])
  return {
    path: pathOf(projection, [...ra, ...dec]),
    ra: spread(
      ra.flatMap(({ at, coordinates }) => crossing(projection, coordinates, 'y', FRAME.bottom, raText(at, raStep))),
      'x',
      44,
    ).map((label) => ({ ...label, y: FRAME.bottom + 13 })),
    dec: hasPole
      ? alongMeridian(projection, centre.decDeg, dec, decStep)
      : spread(
          dec.flatMap(({ at, coordinates }) =>
            crossing(projection, coordinates, 'x', FRAME.left, decText(at, decStep)),
          ),
          'y',
          14,
        ).map((label) => ({ ...label, x: FRAME.left - 4 })),
  }
}

/** Round a pole the circles of declination are labelled along the meridian that goes down from it. */
function alongMeridian(projection: GeoProjection, poleDec: number, dec: readonly Line[], decStep: number): GridLabel[] {
  const lowest = Array.from({ length: 24 }, (_, k) => k * 15).toSorted(
    (a, b) => (projection([b, poleDec > 0 ? 85 : -85])?.[1] ?? 0) - (projection([a, poleDec > 0 ? 85 : -85])?.[1] ?? 0),
  )[0]
  return dec.flatMap(({ at }) => {
    const [x, y] = projection([lowest, at]) ?? [0, 0]
    const isInside = y > FRAME.top && y < FRAME.bottom - 6 && x > FRAME.left + 30 && x < FRAME.right
    return isInside && Math.abs(at) < 90 ? [{ text: decText(at, decStep), x: x - 3, y }] : []
  })
}

function multiples([from, to]: [number, number], stepDeg: number): number[] {
  const values: number[] = []
  // A whole turn has its first line only once.
  const last = to - from >= 360 ? from + 360 - stepDeg / 2 : to
  for (let k = Math.ceil(from / stepDeg - 1e-9); k * stepDeg <= last + 1e-9; k++) values.push(k * stepDeg)
  return values
}

/** Where a line crosses an edge of the frame, inside the other two. */
function crossing(
  projection: GeoProjection,
  coordinates: readonly [number, number][],
  axis: 'x' | 'y',
  edge: number,
  text: string,
): GridLabel[] {
  let before: [number, number] | null = null
  for (const coordinate of coordinates) {
    const here = projection(coordinate)
    if (before && here) {
      const index = axis === 'x' ? 0 : 1
      const [a, b] = [before[index] - edge, here[index] - edge]
      if (a * b <= 0 && a !== b) {
        const t = a / (a - b)
        const x = before[0] + (here[0] - before[0]) * t
        const y = before[1] + (here[1] - before[1]) * t
        const inside = axis === 'x' ? y > FRAME.top && y < FRAME.bottom : x > FRAME.left && x < FRAME.right
        if (inside) return [{ text, x, y }]
      }
    }
    before = here
  }
  return []
}

/** Leaves out labels that would stand on another. */
function spread(labels: GridLabel[], axis: 'x' | 'y', apart: number): GridLabel[] {
  const kept: GridLabel[] = []
  for (const label of labels.toSorted((a, b) => a[axis] - b[axis])) {
    const last = kept[kept.length - 1]
    if (!last || label[axis] - last[axis] >= apart) kept.push(label)
  }
  return kept
}

/** `10h20m`, to what the step of the grid needs. */
export function raText(raDeg: number, stepDeg: number): string {
  const seconds = (Math.round((((raDeg % 360) + 360) % 360) * 240) + 86_400) % 86_400
  const [h, m, s] = [Math.floor(seconds / 3600), Math.floor(seconds / 60) % 60, seconds % 60]
  const pair = (value: number) => String(value).padStart(2, '0')
  if (stepDeg % 15 === 0) return `${h}ʰ`
  if ((stepDeg * 240) % 60 === 0) return `${h}ʰ${pair(m)}ᵐ`
  return `${h}ʰ${pair(m)}ᵐ${pair(s)}ˢ`
}

/** `+2°30′`, to what the step of the grid needs. */
export function decText(decDeg: number, stepDeg: number): string {
  const minutes = Math.round(Math.abs(decDeg) * 60)
  const sign = minutes === 0 ? '' : decDeg < 0 ? '−' : '+'
  const degrees = `${sign}${Math.floor(minutes / 60)}°`
  return stepDeg % 1 === 0 ? degrees : `${degrees}${String(minutes % 60).padStart(2, '0')}′`
}
