import Link from 'next/link'
import { Notice } from '@/components/ui/notice'

/** Tells a grader that others may not be shown, and neither how many nor which. */
export function HeldBack({ slug }: { slug: string }) {
  return (
    <Notice>
      Only candidates that you have graded yourself are here; what is confirmed beyond them is held back until you have,
      so that nobody’s judgement sways yours. For the same reason the files of the catalogue go to leads and viewers
      only.{' '}
      <Link href={`/campaigns/${slug}/bench`} className="underline underline-offset-4">
        Go to the bench
      </Link>
    </Notice>
  )
}
