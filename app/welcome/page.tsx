import type { Metadata } from 'next'
import { redirect } from 'next/navigation'
import { AdministratorForm } from '@/components/welcome/administrator-form'
import { Doorway } from '@/components/welcome/doorway'
import { database } from '@/lib/platform/database'
import { isFirstVisit } from '@/lib/work/people/make-administrator'
import { PASSWORD_HINT } from '@/lib/work/people/passwords'
import { makeAdministratorAction } from './actions'

export const metadata: Metadata = { title: 'First visit' }
export const dynamic = 'force-dynamic'

export default async function WelcomePage() {
  if (!(await isFirstVisit(await database()))) redirect('/')
  return (
    <Doorway
      title="This site is new"
      lead="Make its administrator first. Administrators look after accounts and mail, and set up campaigns."
    >
      <AdministratorForm action={makeAdministratorAction} passwordHint={PASSWORD_HINT} />
    </Doorway>
  )
}
