import Link from 'next/link'
import { Button } from '@/components/ui/button'
import type { GradeLetter } from '@/db/schema/grading'
import type { BenchSession } from './bench-session'
import { gradeName } from './grade-words'

const ORDER: GradeLetter[] = ['A', 'B', 'C', 'N', 'U']

/** `You graded 23 candidates: 2 sure, 21 not a lens.` Nothing to compare oneself with. */
export function sittingSentence({ given }: BenchSession): string {
  if (given.length === 0) return ''
  const parts = ORDER.flatMap((letter) => {
    const number = given.filter(({ answer }) => answer.grade === letter).length
    return number > 0 ? [`${number} ${gradeName(letter).toLowerCase()}`] : []
  })
  return `In this sitting you graded ${given.length === 1 ? 'one candidate' : `${given.length} candidates`}: ${parts.join(', ')}.`
}

function wordsOf(session: BenchSession): { title: string; text: string } {
  const { left } = session.counts
  if (!session.imaged) {
    return {
      title: 'No pictures to grade yet',
      text: 'Candidates come to the bench as soon as their cutouts have been read and imaged. This page looks again by itself.',
    }
  }
  if (session.supply === 'failed') {
    return {
      title: 'The next candidates did not come',
      text: 'The server cannot be reached just now. What you graded is kept in this browser until it is saved; this page tries again by itself.',
    }
  }
  if (session.supply === 'asking' && left > 0) return { title: 'Fetching the next candidates', text: '' }
  if (left > 0) {
    return {
      title: left === 1 ? 'The last one is on another bench' : `The last ${left} are on other benches`,
      text: 'Other people hold them just now. What they leave comes to you; this page looks again by itself.',
    }
  }
  return {
    title: 'Nothing is left for you',
    text: 'You have graded every candidate that still wants a grade from you. Thank you.',
  }
}

/** In place of the stamp when there is none to show. */
export function BenchRest({
  slug,
  session,
  lead,
  onLookBack,
}: {
  slug: string
  session: BenchSession
  lead: boolean
  onLookBack: () => void
}) {
  const { title, text } = wordsOf(session)
  const sitting = sittingSentence(session)
  const link =
    'inline-flex min-h-11 items-center text-small underline decoration-line underline-offset-4 hover:decoration-text'
  return (
    <div className="grid flex-1 place-items-center p-6">
      <div className="flex max-w-lg flex-col items-start gap-4" role="status">
        <h1 className="text-display font-semibold">{title}</h1>
        {text ? <p className="text-mute">{text}</p> : null}
        {sitting ? <p className="text-mute">{sitting}</p> : null}
        <div className="flex flex-wrap items-center gap-x-5 gap-y-2">
          {session.given.length > 0 ? <Button onClick={onLookBack}>Look back at the last one</Button> : null}
          {lead && !session.imaged ? (
            <Link prefetch={false} className={link} href={`/campaigns/${slug}/intake`}>
              To the intake
            </Link>
          ) : null}
          <Link prefetch={false} className={link} href={`/campaigns/${slug}`}>
            To the campaign
          </Link>
          <Link prefetch={false} className={link} href="/">
            All your campaigns
          </Link>
        </div>
      </div>
    </div>
  )
}
