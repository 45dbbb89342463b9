import type { Metadata } from 'next'
import { permitSitePage } from '@/app/_lib/site-page-permit'
import { counted } from '@/components/campaigns/in-words'
import { PageHead } from '@/components/campaigns/page-head'
import { AccountList } from '@/components/people/account-list'
import { SiteFrame } from '@/components/people/site-frame'
import { database } from '@/lib/platform/database'
import { listAccounts } from '@/lib/work/people/accounts'
import { setAdministratorAction } from '../actions'

export const metadata: Metadata = { title: 'Accounts' }

export default async function AccountsPage() {
  const permit = await permitSitePage('/admin/accounts')
  const accounts = await listAccounts(await database(), permit)
  return (
    <SiteFrame viewer={permit.viewer} mayCreate>
      <PageHead
        title={counted(accounts.length, 'account')}
        lead="An account is made when somebody accepts an invitation to a campaign."
      />
      <AccountList
        accounts={accounts}
        ownId={permit.viewer.id}
        setAdministrator={(personId, isAdmin) => setAdministratorAction.bind(null, personId, isAdmin)}
      />
    </SiteFrame>
  )
}
