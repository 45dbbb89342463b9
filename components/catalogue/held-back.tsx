import Link from 'next/link'
import { Notice } from '@/components/ui/notice'

/** Tells a grader how many entries are not shown, and nothing of which they are. */
export function HeldBack({ heldBack, all, slug }: { heldBack: number; all: number; slug: string }) {
  const what =
    heldBack === all
      ? `All ${all.toLocaleString('en')} are held back until you have graded them yourself.`
      : `${heldBack.toLocaleString('en')} of ${all.toLocaleString('en')} ${heldBack === 1 ? 'is' : 'are'} held back until you have graded ${heldBack === 1 ? 'it' : 'them'} yourself.`
  return (
    <Notice>
      {what} So nobody’s judgement sways yours. For the same reason the files of the catalogue go to leads and viewers
      only.{' '}
      <Link href={`/campaigns/${slug}/bench`} className="underline underline-offset-4">
        Go to the bench
      </Link>
    </Notice>
  )
}
