/** The table as a picture: looks per candidate of the product beside six, Wald's number and the aim, as SVG. */
import { FIXED_LOOKS, type DesignComparison } from './compare-designs'
import { AIM_OF_FIXED } from './looks-table'

const WIDTH = 760
const LEFT = 150
const RIGHT = 24
const TOP = 46
const ROW = 30
const FOOT = 46

const x = (looks: number) => (LEFT + (looks / (FIXED_LOOKS + 0.3)) * (WIDTH - LEFT - RIGHT)).toFixed(1)

/** Colours that hold on white and on near-black: the picture stands in pages of either. */
const INK = '#7a756b'
const STRONG = '#a05f00'
const FAINT = '#b9b1a1'

export function looksPlot(comparisons: readonly DesignComparison[]): string {
  const height = TOP + comparisons.length * ROW + FOOT
  const bottom = height - FOOT
  const text = (at: string | number, y: number, words: string, more = '') =>
    `<text x="${at}" y="${y}" fill="${INK}" ${more}>${words}</text>`
  const lines = [
    `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${WIDTH} ${height}" role="img" font-family="system-ui, sans-serif" font-size="13">`,
    '<title>Looks per candidate against six looks each, for a catalogue as complete and as pure</title>',
    text(
      10,
      20,
      'Bar: looks per candidate. Pale end: looks at calibration stamps. Tick: Wald’s number. Dashes: the aim.',
    ),
  ]
  for (let looks = 0; looks <= FIXED_LOOKS; looks++) {
    lines.push(
      `<line x1="${x(looks)}" x2="${x(looks)}" y1="${TOP - 8}" y2="${bottom}" stroke="${FAINT}" stroke-width="${looks === FIXED_LOOKS ? 2 : 0.5}"/>`,
      text(x(looks), bottom + 18, String(looks), 'text-anchor="middle"'),
    )
  }
  lines.push(text(x(FIXED_LOOKS / 2), bottom + 38, 'looks per candidate', 'text-anchor="middle"'))
  for (const [row, { scenario, product, waldLooks }] of comparisons.entries()) {
    const y = TOP + row * ROW
    const { looksPerCandidate: looks, calibrationLooksPerCandidate: calibration } = product
    const width = (from: number, to: number) => (Number(x(to)) - Number(x(from))).toFixed(1)
    const aim = AIM_OF_FIXED.get(scenario.lensShare)
    lines.push(
      text(LEFT - 10, y + 15, `${Math.round(100 * scenario.lensShare)} %, ${scenario.pool}`, 'text-anchor="end"'),
      `<rect x="${x(0)}" y="${y + 2}" width="${width(0, looks)}" height="18" fill="${STRONG}"/>`,
      `<rect x="${x(looks)}" y="${y + 2}" width="${width(looks, looks + calibration)}" height="18" fill="${STRONG}" opacity="0.35"/>`,
      `<line x1="${x(waldLooks)}" x2="${x(waldLooks)}" y1="${y - 2}" y2="${y + 24}" stroke="${INK}" stroke-width="2.5"/>`,
      text(x(looks + calibration + 0.06), y + 16, (looks / FIXED_LOOKS).toFixed(2)),
    )
    if (aim !== undefined) {
      const at = x(aim * FIXED_LOOKS)
      lines.push(
        `<line x1="${at}" x2="${at}" y1="${y - 2}" y2="${y + 24}" stroke="${INK}" stroke-width="1.5" stroke-dasharray="3 2"/>`,
      )
    }
  }
  return `${[...lines, '</svg>'].join('\n')}\n`
}
