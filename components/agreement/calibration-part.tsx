import { counted } from '@/components/campaigns/in-words'
import { XyPlot } from '@/components/plots/xy-plot'
import type { CalibrationReport } from '@/lib/work/reports/report-types'
import { percentOf } from './words'

/** Whether lens probabilities mean what they say, on stamps of known truth. */
export function CalibrationPart({ calibration, fileName }: { calibration: CalibrationReport; fileName: string }) {
  const { bins, stamps, lensStamps, graded, prior, brierScore, baseBrierScore, expectedCalibrationError } = calibration
  if (brierScore === null || baseBrierScore === null || prior === null) {
    return (
      <p className="max-w-3xl text-mute">
        {stamps === 0
          ? 'There are no calibration stamps in this campaign, so nothing outside the graders says how right they are. '
          : `There are ${counted(stamps, 'calibration stamp')}, of which ${counted(lensStamps, 'is a lens', 'are lenses')}, and ${graded} have been graded: a curve takes graded stamps of both kinds. `}
        Mix candidates of known truth into the queue, simulated lenses and sure non-lenses, twenty of each or more.
      </p>
    )
  }
  const filled = bins.filter(({ count }) => count > 0)
  const range = ({ low, high }: { low: number; high: number }) => `${low.toFixed(1)} to ${high.toFixed(1)}`
  return (
    <div className="flex flex-col gap-4">
      <XyPlot
        title="Lens probability against truth"
        description={`${graded} graded calibration stamps. ${filled.map((bin) => `Probability ${range(bin)}: ${bin.lenses} of ${bin.count} are lenses`).join('; ')}. Brier score ${brierScore.toFixed(3)}.`}
        fileName={`${fileName}-calibration`}
        square
        mostWidth={440}
        xDomain={[0, 1]}
        yDomain={[0, 1]}
        xLabel="Lens probability"
        yLabel="Share that are lenses"
        diagonal="as it should be"
        series={[
          {
            form: 'disc',
            label: 'Stamps',
            points: filled.map((bin) => ({
              x: bin.meanProbability ?? 0,
              y: bin.lensShare ?? 0,
              low: bin.interval?.low ?? null,
              high: bin.interval?.high ?? null,
              text: `${bin.count}`,
              reading: `Probability ${range(bin)}, in the mean ${bin.meanProbability?.toFixed(2)}: ${bin.lenses} of ${bin.count} stamps are lenses, ${percentOf(bin.lensShare ?? 0)} (${percentOf(bin.interval?.low ?? 0)} to ${percentOf(bin.interval?.high ?? 1)}).`,
            })),
          },
        ]}
        table={{
          columns: [
            { name: 'Probability from', numeric: true },
            { name: 'to', numeric: true },
            { name: 'Stamps', numeric: true },
            { name: 'Lenses', numeric: true },
            { name: 'Mean probability', numeric: true },
            { name: 'Share of lenses', numeric: true },
            { name: '95 % from', numeric: true },
            { name: '95 % to', numeric: true },
          ],
          rows: bins.map((bin) => [
            bin.low,
            bin.high,
            bin.count,
            bin.lenses,
            bin.meanProbability,
            bin.lensShare,
            bin.interval?.low ?? null,
            bin.interval?.high ?? null,
          ]),
        }}
      />
      <p className="max-w-3xl text-small text-mute">
        Brier score <span className="text-text">{brierScore.toFixed(3)}</span>, where 0 is perfect and always saying{' '}
        {percentOf(prior)} would score {baseBrierScore.toFixed(3)}; mean distance from the line{' '}
        {(expectedCalibrationError ?? 0).toFixed(3)}. Numbers beside points count stamps; intervals are Wilson’s at 95
        %. Each of the {graded} stamps is judged by reliabilities learned without its own grades, starting from the{' '}
        {percentOf(prior)} of lenses among the stamps.
      </p>
    </div>
  )
}
