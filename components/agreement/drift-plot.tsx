import { XyPlot, type XyPoint } from '@/components/plots/xy-plot'
import { day } from '@/components/campaigns/in-words'
import type { Drift, DriftWindow, ShareEstimate } from '@/lib/work/reports/report-types'
import { shareInWords } from './words'

/** Reliability of one person over their own grades. */
export function DriftPlot({ label, drift, fileName }: { label: string; drift: Drift; fileName: string }) {
  const { windows, size } = drift
  if (windows.length < 2) {
    return (
      <p className="text-small text-mute">
        Too few grades to show a course: it takes windows of {size} grades, and two of them at the least.
      </p>
    )
  }
  const pointsOf = (pick: (window: DriftWindow) => ShareEstimate | null, what: string): XyPoint[] =>
    windows.flatMap((window) => {
      const share = pick(window)
      if (!share) return []
      const where = `Grades ${window.from.toLocaleString('en')} to ${window.to.toLocaleString('en')} (${day(new Date(window.fromAt).toISOString())} to ${day(new Date(window.toAt).toISOString())})`
      return [
        {
          x: (window.from + window.to) / 2,
          y: share.value,
          ...share.interval,
          reading: `${where}: ${what} ${shareInWords(share)}.`,
        },
      ]
    })
  const columns = (share: ShareEstimate | null) => [
    share?.value ?? null,
    share?.interval.low ?? null,
    share?.interval.high ?? null,
  ]
  return (
    <XyPlot
      title={`Course of ${label}’s grades`}
      description={`Shares in ${windows.length} sliding windows of ${size} of their own grades each, every one half over the one before.`}
      fileName={`${fileName}-course-${label}`}
      xDomain={[0, windows[windows.length - 1].to]}
      yDomain={[0, 1]}
      xLabel="Own grades, in order"
      yLabel="Share"
      height={280}
      series={[
        {
          form: 'disc',
          label: 'Lenses that get A or B',
          lined: true,
          points: pointsOf(({ lensesSeen }) => lensesSeen, 'A or B to lenses in'),
        },
        {
          form: 'square',
          label: 'Non-lenses that get C or N',
          lined: true,
          points: pointsOf(({ nonLensesSeen }) => nonLensesSeen, 'C or N to non-lenses in'),
        },
      ]}
      table={{
        columns: [
          { name: 'Grade from', numeric: true },
          { name: 'Grade to', numeric: true },
          { name: 'Lenses given A or B', numeric: true },
          { name: '95 % from', numeric: true },
          { name: 'to', numeric: true },
          { name: 'Non-lenses given C or N', numeric: true },
          { name: '95 % from ', numeric: true },
          { name: 'to ', numeric: true },
        ],
        rows: windows.map((window) => [
          window.from,
          window.to,
          ...columns(window.lensesSeen),
          ...columns(window.nonLensesSeen),
        ]),
      }}
    />
  )
}
