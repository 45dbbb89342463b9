import { counted } from '@/components/campaigns/in-words'
import { Notice } from '@/components/ui/notice'
import type { IntakeSummary } from '@/lib/work/intake/delivered-file'
import { ProgressBar } from '@/components/ui/progress-bar'

/** What the server is doing. It goes on without this page, and after a restart. */
export function WorkProgress({ summary }: { summary: IntakeSummary }) {
  const { working, progress, stored, fault } = summary
  if (!working && !fault) return null
  return (
    <div className="flex flex-col gap-2">
      {working ? (
        <>
          <p role="status" className="text-small text-mute">
            {progress
              ? `${progress.what === 'unpacking' ? 'Unpacking' : 'Reading and imaging'}: ${progress.done.toLocaleString('en')} of ${counted(progress.total, 'file')} done.`
              : stored > 0
                ? `${counted(stored, 'file')} ${stored === 1 ? 'waits' : 'wait'} to be read.`
                : 'Imaging.'}{' '}
            You may close this page; the work goes on.
          </p>
          <ProgressBar label="Files read and imaged" done={progress?.done ?? 0} total={progress?.total ?? 1} />
        </>
      ) : null}
      {fault ? (
        <Notice tone="alarm">
          Reading stopped: {fault}{' '}
          {working ? 'It is tried again by itself.' : 'Nothing is lost. Try again, or tell an administrator.'}
        </Notice>
      ) : null}
    </div>
  )
}
