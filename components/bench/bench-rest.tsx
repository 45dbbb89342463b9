import Link from 'next/link'
import { Button } from '@/components/ui/button'
import { KeyCap } from '@/components/ui/key-cap'
import type { BenchSession } from './bench-session'
import { sittingSentence } from './kindness'

function wordsOf(session: BenchSession, resting: boolean, waiting: number): { title: string; text: string } {
  if (resting) {
    const text =
      waiting === 0
        ? 'Everything you graded is saved. Whenever you come back, it goes on where you stopped.'
        : `${waiting === 1 ? 'One grade is' : `${waiting} grades are`} still on the way to the server and kept in this browser until then.`
    return { title: 'Thank you for looking', text }
  }
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
      text: 'The server cannot be reached just now, or you are signed out. What you graded is kept in this browser until it is saved; this page tries again by itself.',
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
  resting,
  waiting,
  onGoOn,
  onLookBack,
}: {
  slug: string
  session: BenchSession
  lead: boolean
  /** The person has ended the sitting, whatever is left. */
  resting: boolean
  /** Grades on their way. */
  waiting: number
  onGoOn: () => void
  onLookBack: () => void
}) {
  const { title, text } = wordsOf(session, resting, waiting)
  const sitting = sittingSentence(session.given)
  const link =
    'inline-flex min-h-11 items-center text-small underline decoration-line underline-offset-4 hover:decoration-text'
  return (
    <div className="grid flex-1 place-items-center p-6">
      <div className="flex max-w-lg flex-col items-start gap-4" role="status">
        <h1 className="text-display font-semibold">{title}</h1>
        {text ? <p className="text-mute">{text}</p> : null}
        {sitting ? <p className="text-mute">{sitting}</p> : null}
        <div className="flex flex-wrap items-center gap-x-5 gap-y-2">
          {resting ? (
            <Button onClick={onGoOn}>
              <span className="hidden md:inline">
                <KeyCap>E</KeyCap>
              </span>{' '}
              Go on grading
            </Button>
          ) : null}
          {session.given.length > 0 ? <Button onClick={onLookBack}>Look back at the last one</Button> : null}
          {session.supply === 'failed' && !resting ? (
            <a className={link} href={`/signin?next=${encodeURIComponent(`/campaigns/${slug}/bench`)}`}>
              Sign in and come back here
            </a>
          ) : null}
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
