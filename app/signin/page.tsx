import type { Metadata } from 'next'
import { redirect } from 'next/navigation'
import { Doorway } from '@/components/welcome/doorway'
import { SignInForm } from '@/components/welcome/sign-in-form'
import { database } from '@/lib/platform/database'
import { isFirstVisit } from '@/lib/work/people/make-administrator'
import { ownPath } from '@/lib/work/people/own-path'
import { getViewer } from '@/lib/work/people/session'

export const metadata: Metadata = { title: 'Sign in' }

export default async function SignInPage({ searchParams }: PageProps<'/signin'>) {
  const { next } = await searchParams
  const path = ownPath(next)
  if (await getViewer()) redirect(path)
  if (await isFirstVisit(await database())) redirect('/welcome')
  return (
    <Doorway title="Sign in" lead="With the address that you were invited by.">
      <SignInForm next={path} />
      <p className="max-w-sm text-note text-mute">
        No account yet? A lead of your campaign invites you by e-mail; the link in that mail makes the account.
      </p>
    </Doorway>
  )
}
