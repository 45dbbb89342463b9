'use client'

import { Button, ButtonLink } from '@/components/ui/button'
import { Mark } from '@/components/ui/mark'

export default function ErrorPage({ error, reset }: { error: Error & { digest?: string }; reset: () => void }) {
  return (
    <main className="mx-auto flex min-h-dvh max-w-lg flex-col items-start justify-center gap-4 px-6">
      <Mark size={40} />
      <h1 className="text-display font-semibold">This page failed</h1>
      <p className="text-mute">
        What was saved before is safe. Try again; if it fails again, tell an administrator
        {error.digest ? (
          <>
            {' '}
            the number <span className="figures text-text">{error.digest}</span>, which stands in the server’s log
          </>
        ) : null}
        .
      </p>
      <div className="flex gap-3">
        <Button tone="lamp" onClick={reset}>
          Try again
        </Button>
        <ButtonLink href="/">To your campaigns</ButtonLink>
      </div>
    </main>
  )
}
