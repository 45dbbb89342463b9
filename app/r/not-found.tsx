import type { Metadata } from 'next'
import { PublicFrame } from '@/components/public/public-frame'
import { ALL_RELEASES } from '@/components/public/release-links'

export const metadata: Metadata = { title: { absolute: 'Not here · Ringside' }, robots: { index: false } }

export default function NotFound() {
  return (
    <PublicFrame place="Ringside" href="/r">
      <header className="flex max-w-2xl flex-col gap-3">
        <h1 className="text-display font-semibold">No release here that you may read</h1>
        <p className="text-mute">
          The address is wrong, or the release is not open to you: it may be private, or opened by a link whose whole
          address is needed. Members of its campaign can sign in.
        </p>
        <p className="flex flex-wrap gap-x-5">
          <a href={ALL_RELEASES} className="inline-flex min-h-9 items-center underline underline-offset-4">
            All public releases
          </a>
          <a href="/signin" className="inline-flex min-h-9 items-center underline underline-offset-4">
            Sign in
          </a>
        </p>
      </header>
    </PublicFrame>
  )
}
