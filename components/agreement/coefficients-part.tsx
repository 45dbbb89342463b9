import { IntervalPlot } from '@/components/plots/interval-plot'
import type { CampaignAgreement } from '@/lib/work/reports/report-types'
import { coefficientWithInterval, percentOf } from './words'

/** The campaign's coefficients with their intervals, and what each of them weighs. */
export function CoefficientsPart({ campaign, fileName }: { campaign: CampaignAgreement; fileName: string }) {
  const { coefficients, percentAgreement, candidates, resamples } = campaign
  const known = coefficients.filter(({ value }) => value !== null)
  if (known.length === 0) return <p className="text-mute">{coefficients[0].note}</p>
  const lowest = Math.min(0, ...known.map(({ value, interval }) => interval?.low ?? value ?? 0))
  return (
    <div className="flex flex-col gap-4">
      <IntervalPlot
        title="Agreement beyond chance, four ways"
        description={known
          .map(({ name, value, interval }) => `${name} ${coefficientWithInterval(value, interval)}`)
          .join('; ')}
        fileName={`${fileName}-coefficients`}
        axis="Coefficient (0 is chance, 1 full agreement)"
        domain={[lowest < 0 ? Math.max(-1, Math.floor(lowest * 5) / 5) : 0, 1]}
        note={{ at: 0.667, label: '0.67' }}
        series={[{ form: 'disc', label: 'Coefficient' }]}
        rows={coefficients.map(({ name, value, interval, note }) => ({
          label: SHORT[name] ?? name,
          values: [
            value === null
              ? null
              : {
                  value,
                  low: interval?.low ?? null,
                  high: interval?.high ?? null,
                  reading: `${name}: ${coefficientWithInterval(value, interval)}. ${note}`,
                },
          ],
        }))}
        table={{
          columns: [
            { name: 'Coefficient' },
            { name: 'Value', numeric: true },
            { name: '95 % from', numeric: true },
            { name: '95 % to', numeric: true },
            { name: 'Note' },
          ],
          rows: coefficients.map(({ name, value, interval, note }) => [
            name,
            value,
            interval?.low ?? null,
            interval?.high ?? null,
            note,
          ]),
          digits: 3,
        }}
      />
      <p className="max-w-3xl text-small text-mute">
        {percentAgreement === null
          ? ''
          : `Two graders of a candidate give the same letter in ${percentOf(percentAgreement)}. `}
        Alpha and AC2 weigh how far apart letters are; kappa and AC1 ask only whether they are the same. Where lenses
        are rare, alpha and kappa are low even among careful people, because chance agreement on N is high; Gwet’s AC is
        made for that. Over {candidates.toLocaleString('en')} candidates; calibration stamps and graders who are left
        out are not counted. Intervals: 95 %, {resamples} seeded bootstrap draws over candidates. The mark at 0.67 is
        the least that is commonly asked of alpha.
      </p>
    </div>
  )
}

const SHORT: Record<string, string> = {
  'Krippendorff’s alpha, ordinal': 'Krippendorff’s alpha, ordinal',
  'Fleiss’ kappa, for unequal numbers of grades': 'Fleiss’ kappa, unequal numbers',
}
