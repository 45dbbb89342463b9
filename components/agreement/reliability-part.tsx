import { IntervalPlot } from '@/components/plots/interval-plot'
import type { AgreementReport } from '@/lib/work/reports/report-types'
import { percentOf, shareInWords } from './words'

/** How often each person says lens to lenses, and not a lens to the rest, in the order in which they came. */
export function ReliabilityPart({
  report,
  fileName,
}: {
  report: Pick<AgreementReport, 'people' | 'graders' | 'fit'>
  fileName: string
}) {
  const { people, graders, fit } = report
  return (
    <div className="flex flex-col gap-4">
      <IntervalPlot
        title="Reliability of each grader"
        description={people
          .map(
            ({ lensesSeen, nonLensesSeen }, at) =>
              `${graders[at].label}: A or B to ${percentOf(lensesSeen.value)} of lenses, C or N to ${percentOf(nonLensesSeen.value)} of the rest`,
          )
          .join('; ')}
        fileName={`${fileName}-reliability`}
        axis="Share of candidates"
        domain={[0, 1]}
        series={[
          { form: 'disc', label: 'Lenses that get A or B' },
          { form: 'square', label: 'Non-lenses that get C or N' },
        ]}
        rows={people.map(({ lensesSeen, nonLensesSeen, lenses, nonLenses }, at) => {
          const { label, leftOut } = graders[at]
          return {
            label: leftOut ? `${label} (left out)` : label,
            values: [
              {
                value: lensesSeen.value,
                ...lensesSeen.interval,
                reading: `${label} gives A or B to ${shareInWords(lensesSeen)} of lenses, of which about ${lenses.toFixed(0)} were seen.`,
              },
              {
                value: nonLensesSeen.value,
                ...nonLensesSeen.interval,
                reading: `${label} gives C or N to ${shareInWords(nonLensesSeen)} of what is no lens, of which about ${nonLenses.toFixed(0)} were seen.`,
              },
            ],
          }
        })}
        table={{
          columns: [
            { name: 'Grader' },
            { name: 'Grades', numeric: true },
            { name: 'Lenses given A or B', numeric: true },
            { name: '95 % from', numeric: true },
            { name: 'to', numeric: true },
            { name: 'Non-lenses given C or N', numeric: true },
            { name: '95 % from ', numeric: true },
            { name: 'to ', numeric: true },
            { name: 'Lenses seen, expected', numeric: true },
            { name: 'Bits a look', numeric: true },
          ],
          rows: people.map(({ grades, lensesSeen, nonLensesSeen, lenses, bitsPerLook }, at) => [
            graders[at].leftOut ? `${graders[at].label} (left out)` : graders[at].label,
            grades,
            lensesSeen.value,
            lensesSeen.interval.low,
            lensesSeen.interval.high,
            nonLensesSeen.value,
            nonLensesSeen.interval.low,
            nonLensesSeen.interval.high,
            lenses,
            bitsPerLook,
          ]),
        }}
      />
      <p className="max-w-3xl text-small text-mute">
        {fit.source === 'run'
          ? 'By the reliability model of the newest consensus run, counted over all grades as they stand.'
          : 'By the reliability model fitted to the grades as they stand, for this page only: the campaign’s verdicts rest on other rules or on an earlier run.'}{' '}
        Whether a candidate is a lens is known of calibration stamps only; of the others the lens probability is
        counted. Intervals hold 95 %, as if those probabilities were true; each begins with ten grades of either kind
        that a usual grader would give. A share of lenses of {percentOf(fit.lensShare)} is estimated for the search
        {fit.converged ? '' : '; the fit had not settled when it was stopped'}. People stand in the order in which they
        came.
      </p>
    </div>
  )
}
