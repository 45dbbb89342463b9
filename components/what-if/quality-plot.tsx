'use client'

import { useId } from 'react'
import type { RuleQuality } from '@/lib/science/agreement/rule-quality'
import type { RuleInput } from '@/lib/work/campaigns/rule-input'
import type { CurvePoint, QualityCurve } from '@/lib/work/consensus/quality-curve'
import type { RuleTrial } from '@/lib/work/consensus/try-rule'
import { share } from './quality-table'

const WIDTH = 460
const HEIGHT = 330
const LEFT = 52
const BOTTOM = 44
const TOP = 12
const RIGHT = 16

interface Place {
  completeness: number | null
  purity: number | null
}

/** What the stamps say of both, with intervals; null unless they say something of each. */
function crossOf(quality: RuleQuality | null) {
  if (!quality) return null
  const { completeness, purity } = quality
  if (completeness.value === null || purity.value === null || !completeness.interval || !purity.interval) return null
  return { completeness: completeness.value, purity: purity.value, across: completeness.interval, up: purity.interval }
}

/** Where an axis begins: a tenth below all that is marked, and with some room. */
function axisFrom(values: (number | null | undefined)[]): number {
  const known = values.filter((value): value is number => typeof value === 'number')
  const lowest = Math.min(1, ...known)
  return Math.max(0, Math.min(0.8, Math.floor((lowest - 0.12) * 10) / 10))
}

/** Thresholds that are written beside the curve. */
function marksOf(rule: RuleInput): { threshold: number; text: string }[] {
  if (rule.method === 'mean') return [1, 1.5, 2, 2.5].map((mean) => ({ threshold: mean, text: `mean ${mean}` }))
  const { missedLens } = rule
  return [0.1, 0.01, 0.001, 0.0001].map((alpha) => ({
    threshold: Math.log((1 - missedLens) / alpha),
    text: `1 in ${Math.round(1 / alpha).toLocaleString('en')}`,
  }))
}

/** Last point of the curve, which goes by falling threshold, that is at or above the threshold. */
function pointAt(curve: readonly CurvePoint[], threshold: number): CurvePoint | null {
  return curve.findLast((point) => point.threshold >= threshold - 1e-9) ?? null
}

/** Purity against completeness as the threshold that confirms moves, with the rule in force and the tried one marked. */
export function QualityPlot({
  curve,
  rule,
  inForce,
  trial,
}: {
  curve: QualityCurve
  rule: RuleInput
  inForce: RuleTrial
  trial: RuleTrial
}) {
  const clip = useId()
  const { promised, stamps } = curve
  if (promised.length < 2 || !trial.promised || !inForce.promised) return null
  const [before, after]: Place[] = [inForce.promised, trial.promised]
  const measured = trial.stamps.quality
  const cross = crossOf(measured)
  const from = {
    x: axisFrom([before.completeness, after.completeness, measured?.completeness.value]),
    y: axisFrom([before.purity, after.purity, measured?.purity.value]),
  }
  const x = (value: number) => LEFT + ((value - from.x) / (1 - from.x)) * (WIDTH - LEFT - RIGHT)
  const y = (value: number) => TOP + ((1 - value) / (1 - from.y)) * (HEIGHT - TOP - BOTTOM)
  const line = (points: readonly CurvePoint[]) =>
    points
      .map(({ completeness, purity }, at) => `${at ? 'L' : 'M'}${x(completeness).toFixed(1)} ${y(purity).toFixed(1)}`)
      .join('')
  const ticks = (start: number) => {
    const step = 1 - start > 0.55 ? 0.2 : 0.1
    return Array.from({ length: 11 }, (_, at) => Number((1 - at * step).toFixed(2))).filter(
      (tick) => tick >= start - 1e-9,
    )
  }
  const marks = marksOf(rule).flatMap(({ threshold, text }) => {
    const point = pointAt(promised, threshold)
    return point && point.completeness >= from.x && point.purity >= from.y ? [{ ...point, text }] : []
  })
  // A label that would lie on another is left out; the table has it.
  const written = marks.filter((mark, at) => {
    const before = marks[at - 1]
    return !before || Math.hypot(x(mark.completeness) - x(before.completeness), y(mark.purity) - y(before.purity)) > 50
  })
  const words = (name: string, { completeness, purity }: Place) =>
    `${name}: completeness ${share(completeness)}, purity ${share(purity)}.`
  return (
    <figure className="flex flex-col gap-2">
      <figcaption className="text-small font-semibold">
        Purity against completeness, as the threshold that confirms moves
      </figcaption>
      <svg
        viewBox={`0 0 ${WIDTH} ${HEIGHT}`}
        role="img"
        aria-label={`Purity against completeness. ${words('Rule in force', before)} ${words('Tried rule', after)}`}
        className="w-full max-w-xl text-note"
      >
        <clipPath id={clip}>
          <rect x={LEFT} y={TOP - 4} width={WIDTH - LEFT - RIGHT + 4} height={HEIGHT - TOP - BOTTOM + 4} />
        </clipPath>
        <g className="figures fill-mute" fontSize="11">
          {ticks(from.x).map((tick) => (
            <g key={`x${tick}`}>
              <line x1={x(tick)} x2={x(tick)} y1={TOP} y2={HEIGHT - BOTTOM} className="stroke-line" />
              <text x={x(tick)} y={HEIGHT - BOTTOM + 16} textAnchor="middle">
                {Math.round(100 * tick)}
              </text>
            </g>
          ))}
          {ticks(from.y).map((tick) => (
            <g key={`y${tick}`}>
              <line x1={LEFT} x2={WIDTH - RIGHT} y1={y(tick)} y2={y(tick)} className="stroke-line" />
              <text x={LEFT - 8} y={y(tick) + 4} textAnchor="end">
                {Math.round(100 * tick)}
              </text>
            </g>
          ))}
        </g>
        <g className="fill-text" fontSize="12">
          <text x={(LEFT + WIDTH - RIGHT) / 2} y={HEIGHT - 6} textAnchor="middle">
            completeness, %
          </text>
          <text transform={`translate(13 ${(TOP + HEIGHT - BOTTOM) / 2}) rotate(-90)`} textAnchor="middle">
            purity, %
          </text>
        </g>
        <g clipPath={`url(#${clip})`} fill="none">
          <path d={line(promised)} className="stroke-text" strokeWidth="1.75" />
          {stamps.length > 1 ? (
            <path d={line(stamps)} className="stroke-mute" strokeWidth="1.5" strokeDasharray="5 4" />
          ) : null}
          {cross ? (
            <g className="stroke-lamp" strokeWidth="1.25" opacity="0.8">
              <line x1={x(cross.across.low)} x2={x(cross.across.high)} y1={y(cross.purity)} y2={y(cross.purity)} />
              <line x1={x(cross.completeness)} x2={x(cross.completeness)} y1={y(cross.up.low)} y2={y(cross.up.high)} />
            </g>
          ) : null}
          {before.completeness !== null && before.purity !== null ? (
            <circle cx={x(before.completeness)} cy={y(before.purity)} r="6.5" className="stroke-text" strokeWidth="2" />
          ) : null}
          {after.completeness !== null && after.purity !== null ? (
            <circle cx={x(after.completeness)} cy={y(after.purity)} r="4.5" className="fill-lamp" />
          ) : null}
        </g>
        <g className="fill-mute" fontSize="11">
          {marks.map(({ completeness, purity, text }) => (
            <circle key={text} cx={x(completeness)} cy={y(purity)} r="2" className="fill-text" />
          ))}
          {written.map(({ completeness, purity, text }) => (
            <text key={text} x={x(completeness) - 7} y={y(purity) + 13} textAnchor="end">
              {text}
            </text>
          ))}
        </g>
      </svg>
      <p className="text-note text-mute">
        Ring: the rule in force. Amber dot: the tried rule
        {cross ? '; amber cross: its stamps, with 95 % intervals' : ''}. Line: by lens probabilities
        {stamps.length > 1 ? '; dashed: by calibration stamps' : ''}.
      </p>
      <CurveTable marks={marks} before={before} after={after} />
    </figure>
  )
}

function CurveTable({
  marks,
  before,
  after,
}: {
  marks: (CurvePoint & { text: string })[]
  before: Place
  after: Place
}) {
  const rows = [
    { name: 'rule in force', ...before },
    { name: 'tried rule', ...after },
    ...marks.map(({ text, completeness, purity }) => ({ name: `confirm from ${text}`, completeness, purity })),
  ]
  return (
    <details className="text-note text-mute">
      <summary className="min-h-6">As a table</summary>
      <table className="mt-1 text-left">
        <thead>
          <tr>
            {['Threshold', 'Completeness', 'Purity'].map((head) => (
              <th key={head} scope="col" className="pr-6 font-normal">
                {head}
              </th>
            ))}
          </tr>
        </thead>
        <tbody className="figures text-text">
          {rows.map(({ name, completeness, purity }) => (
            <tr key={name}>
              <th scope="row" className="pr-6 font-normal">
                {name}
              </th>
              <td className="pr-6">{share(completeness)}</td>
              <td>{share(purity)}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </details>
  )
}
