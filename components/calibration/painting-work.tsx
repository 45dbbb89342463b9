import { counted } from '@/components/campaigns/in-words'
import { Notice } from '@/components/ui/notice'
import { ProgressBar } from '@/components/ui/progress-bar'
import type { CalibrationPage } from '@/lib/work/calibration/calibration-page'

/** How far the making of stamps is, and what came of the last order. */
export function PaintingWork({ page: { work, counts, fault, last } }: { page: CalibrationPage }) {
  if (work) {
    return (
      <div role="status" className="flex flex-col gap-2 text-small">
        <p>
          {work.total === 0 ? 'Waiting to begin.' : `Painting: ${work.done} of ${counted(work.total, 'stamp')} made.`}
        </p>
        <ProgressBar done={work.done} total={Math.max(1, work.total)} label="Stamps made" />
      </div>
    )
  }
  if (counts.waiting > 0) {
    return (
      <p role="status" className="text-small">
        {counted(counts.waiting, 'stamp')} made, their pictures are being drawn.
      </p>
    )
  }
  if (fault) return <Notice tone="alarm">Making stamps stopped: {fault} What was made stands.</Notice>
  if (!last || (last.skipped.length === 0 && last.made === last.wanted)) return null
  return (
    <Notice>
      <p>
        {last.made} of {counted(last.wanted, 'stamp')} came of the last order.
        {last.skipped.length > 0 ? ` ${counted(last.skipped.length, 'galaxy', 'galaxies')} could not be used:` : ''}
      </p>
      <ul className="mt-1 text-note text-mute">
        {last.skipped.slice(0, 5).map(({ name, reason }) => (
          <li key={name}>
            <span className="figures">{name}</span>: {reason}
          </li>
        ))}
      </ul>
    </Notice>
  )
}
