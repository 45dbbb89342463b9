import type { RuleInput } from '@/lib/work/campaigns/rule-input'
import { placeInWords, type ScoreBins } from './score-bins'

const WIDTH = 460
const HEIGHT = 120
const FOOT = 20

/** Candidates along the scale of the rule, with what confirms and what sets aside; heights go by the logarithm. */
export function ScoreHistogram({
  bins,
  rule,
  lensShare,
}: {
  bins: ScoreBins
  rule: RuleInput
  lensShare: number | null
}) {
  const { low, high, counts, confirmFrom, setAsideTo } = bins
  const x = (value: number) => ((Math.min(high, Math.max(low, value)) - low) / (high - low)) * WIDTH
  const tallest = Math.log1p(Math.max(1, ...counts))
  const width = WIDTH / counts.length
  const scale = rule.method === 'mean' ? 'mean points' : 'lens probability'
  const [aside, confirm] = [setAsideTo, confirmFrom].map((value) => placeInWords(value, rule, lensShare))
  const left = [
    bins.tooFew > 0 ? `${bins.tooFew.toLocaleString('en')} with too few grades` : null,
    bins.spread > 0 ? `${bins.spread.toLocaleString('en')} that spread too far` : null,
  ].filter((part) => part !== null)
  return (
    <figure className="flex flex-col gap-1">
      <figcaption className="text-small font-semibold">Where the candidates lie</figcaption>
      <svg
        viewBox={`0 0 ${WIDTH} ${HEIGHT + FOOT}`}
        role="img"
        aria-label={`Candidates by ${scale}. Set aside up to ${aside}, confirmed from ${confirm}.`}
        className="w-full max-w-xl"
      >
        <rect x={0} y={0} width={x(setAsideTo)} height={HEIGHT} className="fill-grade-n/25" />
        <rect x={x(confirmFrom)} y={0} width={WIDTH - x(confirmFrom)} height={HEIGHT} className="fill-grade-a/20" />
        {Array.from(counts, (count, bin) => {
          const tall = count > 0 ? Math.max(2, (Math.log1p(count) / tallest) * (HEIGHT - 6)) : 0
          return (
            <rect
              key={bin}
              x={bin * width + 0.5}
              y={HEIGHT - tall}
              width={width - 1}
              height={tall}
              className="fill-text/70"
            />
          )
        })}
        <line x1={0} x2={WIDTH} y1={HEIGHT} y2={HEIGHT} className="stroke-edge" />
        {[setAsideTo, confirmFrom].map((value, at) => (
          <line
            key={at}
            x1={x(value)}
            x2={x(value)}
            y1={0}
            y2={HEIGHT + 4}
            className={at ? 'stroke-lamp' : 'stroke-text'}
            strokeWidth="2"
          />
        ))}
        <g className="figures fill-mute" fontSize="11">
          <text x={x(setAsideTo)} y={HEIGHT + 16} textAnchor={x(setAsideTo) < 60 ? 'start' : 'middle'}>
            {aside}
          </text>
          <text x={x(confirmFrom)} y={HEIGHT + 16} textAnchor={x(confirmFrom) > WIDTH - 60 ? 'end' : 'middle'}>
            {confirm}
          </text>
        </g>
      </svg>
      <p className="text-note text-mute">
        By {scale}; set aside left of the first line, confirmed right of the second. Heights are logarithmic.
        {left.length > 0 ? ` Not shown: ${left.join(', ')}.` : ''}
      </p>
    </figure>
  )
}
