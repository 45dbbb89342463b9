import Link from 'next/link'
import { counted } from '@/components/campaigns/in-words'

/** On the overview: how much of the Agreement page wants to be looked at. */
export function AgreementLine({ alerts, campaignPath }: { alerts: number; campaignPath: string }) {
  return (
    <p className="text-small">
      {alerts > 0 ? (
        <>
          <span className="font-semibold text-split">{counted(alerts, 'thing')} to look at</span>
          {': '}
        </>
      ) : (
        'Nothing stands out: '
      )}
      <Link
        href={`${campaignPath}/agreement`}
        className="underline decoration-line underline-offset-4 hover:decoration-text"
      >
        agreement of each pair, reliability of each grader, and when it will be done
      </Link>
      .
    </p>
  )
}
