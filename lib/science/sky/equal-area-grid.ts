/**
 * Cells of exactly equal area on the sphere, in rings of equal declination, for counting how dense positions lie.
 * Source: Z. Malkin 2019, AJ 158, 158, section 2 (SREAG): rings of about equal height, in each a whole number of cells that are about
 * square, and then the borders of the rings moved so that every cell has the area 4 pi / N.
 */
export interface EqualAreaGrid {
  /** of all cells */
  count: number
  /** of each cell, square degrees */
  areaDeg2: number
  /** sines of the declinations that bound the rings, from -1 to 1 */
  sines: Float64Array
  /** of each ring, from the south pole */
  cellsInRing: Int32Array
  /** number of the first cell of each ring, and of all cells behind the last */
  firstCell: Int32Array
}

const RADIANS = Math.PI / 180
/** The whole sphere. Source: 4 pi (180/pi)^2. */
export const SKY_DEG2 = 4 * Math.PI * (180 / Math.PI) ** 2
const FEWEST_RINGS = 2
const MOST_RINGS = 18_000

/** @param sideDeg about how wide a cell is to be, 0.01 to 90 degrees; others are brought into that range. */
export function equalAreaGrid(sideDeg: number): EqualAreaGrid {
  const rings = Math.min(MOST_RINGS, Math.max(FEWEST_RINGS, Math.round(180 / sideDeg)))
  const height = 180 / rings
  const cellsInRing = new Int32Array(rings)
  const firstCell = new Int32Array(rings + 1)
  for (let ring = 0; ring < rings; ring++) {
    const middle = -90 + (ring + 0.5) * height
    cellsInRing[ring] = Math.max(1, Math.round((360 * Math.cos(middle * RADIANS)) / height))
    firstCell[ring + 1] = firstCell[ring] + cellsInRing[ring]
  }
  const count = firstCell[rings]
  const sines = Float64Array.from(firstCell, (before) => (2 * before) / count - 1)
  return { count, areaDeg2: SKY_DEG2 / count, sines, cellsInRing, firstCell }
}

/** The cell of a position: 0 to count - 1. @param raDeg any finite value. @param decDeg -90 to 90. */
export function cellAt({ sines, cellsInRing, firstCell }: EqualAreaGrid, raDeg: number, decDeg: number): number {
  const sine = Math.sin(decDeg * RADIANS)
  let low = 0
  let high = cellsInRing.length - 1
  while (low < high) {
    const middle = (low + high + 1) >> 1
    if (sines[middle] <= sine) low = middle
    else high = middle - 1
  }
  const turn = (((raDeg % 360) + 360) % 360) / 360
  return firstCell[low] + Math.min(cellsInRing[low] - 1, Math.floor(turn * cellsInRing[low]))
}

export interface CellBounds {
  westRaDeg: number
  eastRaDeg: number
  southDecDeg: number
  northDecDeg: number
}

/** Where a cell lies: right ascension grows from `westRaDeg` to `eastRaDeg`. */
export function cellBounds({ sines, cellsInRing, firstCell }: EqualAreaGrid, cell: number): CellBounds {
  let ring = 0
  while (firstCell[ring + 1] <= cell) ring++
  const width = 360 / cellsInRing[ring]
  const westRaDeg = (cell - firstCell[ring]) * width
  const declination = (sine: number) => Math.asin(Math.min(1, Math.max(-1, sine))) / RADIANS
  return {
    westRaDeg,
    eastRaDeg: westRaDeg + width,
    southDecDeg: declination(sines[ring]),
    northDecDeg: declination(sines[ring + 1]),
  }
}
