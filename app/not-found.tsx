import type { Metadata } from 'next'
import { ButtonLink } from '@/components/ui/button'
import { Mark } from '@/components/ui/mark'

export const metadata: Metadata = { title: 'Not here' }

export default function NotFound() {
  return (
    <main className="mx-auto flex min-h-dvh max-w-lg flex-col items-start justify-center gap-4 px-6">
      <Mark size={40} />
      <h1 className="text-display font-semibold">Nothing here that you may see</h1>
      <p className="text-mute">
        The address is wrong, or the page belongs to a campaign that you are not in, or it takes another role. A lead of
        the campaign can invite you or change your role.
      </p>
      <ButtonLink href="/" tone="lamp">
        To your campaigns
      </ButtonLink>
    </main>
  )
}
