import { XyPlot } from '@/components/plots/xy-plot'
import type { ScoreReport } from '@/lib/work/reports/report-types'
import { percentOf } from './words'

/** Marks along a curve that has hundreds of points: enough to read it from. */
const MARKS = 12

/** The machine search's score against the verdict: receiver operating characteristic with its area. */
export function ScorePart({ score, fileName }: { score: ScoreReport | null; fileName: string }) {
  if (!score) {
    return (
      <p className="max-w-3xl text-mute">
        It takes confirmed and set-aside candidates that have a score of the machine search. Scores come with a
        manifest, in a column named score.
      </p>
    )
  }
  const { points, area, interval, confirmed, setAside, undecided, withoutScore } = score
  const marked = points.filter((_, at) => at % Math.ceil(points.length / MARKS) === 0 || at === points.length - 1)
  const threshold = (value: number | null) => (value === null ? 'no score' : `a score of ${value.toPrecision(3)}`)
  const areaInWords = `${area.toFixed(3)} (${interval.low.toFixed(3)} to ${interval.high.toFixed(3)})`
  return (
    <div className="flex flex-col gap-4">
      <XyPlot
        title={`Score of the machine search: area ${area.toFixed(3)}`}
        description={`Receiver operating characteristic over ${confirmed} confirmed and ${setAside} set-aside candidates. Area ${areaInWords}.`}
        fileName={`${fileName}-score`}
        square
        mostWidth={440}
        xDomain={[0, 1]}
        yDomain={[0, 1]}
        xLabel="Share of set-aside candidates"
        yLabel="Share of confirmed ones at or above the score"
        diagonal="tells nothing"
        series={[
          {
            form: 'disc',
            label: 'Score',
            path: points.map((point) => [point.falsePositiveRate, point.truePositiveRate] as const),
            points: marked.map((point) => ({
              x: point.falsePositiveRate,
              y: point.truePositiveRate,
              low: null,
              high: null,
              reading: `At ${threshold(point.threshold)} or above: ${percentOf(point.truePositiveRate)} of confirmed candidates, ${percentOf(point.falsePositiveRate)} of those set aside.`,
            })),
          },
        ]}
        table={{
          columns: [
            { name: 'Score at or above', numeric: true },
            { name: 'Share of confirmed', numeric: true },
            { name: 'Share of set aside', numeric: true },
          ],
          rows: points.map((point) => [point.threshold, point.truePositiveRate, point.falsePositiveRate]),
          digits: 3,
        }}
      />
      <p className="max-w-3xl text-small text-mute">
        Area <span className="text-text">{areaInWords}</span>: the probability that a confirmed candidate has a higher
        score than one set aside; the interval is Hanley and McNeil’s at 95 %. Over {confirmed.toLocaleString('en')}{' '}
        confirmed and {setAside.toLocaleString('en')} set-aside candidates as they stand now, rulings included;{' '}
        {undecided.toLocaleString('en')} undecided
        {withoutScore ? ` and ${withoutScore.toLocaleString('en')} without a score` : ''} are left out. A verdict is a
        visual judgement, so this says how far machine and eyes agree, not how right either is.
      </p>
    </div>
  )
}
