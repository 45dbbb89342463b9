import type { Metadata } from 'next'
import { FormSection } from '@/components/campaigns/form-section'
import { PageHead } from '@/components/campaigns/page-head'
import { NameForm, PasswordForm } from '@/components/people/account-forms'
import { SiteFrame } from '@/components/people/site-frame'
import { database } from '@/lib/platform/database'
import { mayCreateCampaign } from '@/lib/work/campaigns/create-campaign'
import { PASSWORD_HINT } from '@/lib/work/people/passwords'
import { requireViewer } from '@/lib/work/people/session'
import { changeNameAction, changePasswordAction } from './actions'

export const metadata: Metadata = { title: 'Your account' }

export default async function AccountPage() {
  const viewer = await requireViewer('/account')
  const mayCreate = await mayCreateCampaign(await database(), viewer)
  return (
    <SiteFrame viewer={viewer} mayCreate={mayCreate}>
      <PageHead title={`You are ${viewer.name}`} lead={viewer.email} />
      <FormSection title="Name" about="The others in your campaigns see it. Published files carry a pseudonym instead.">
        <NameForm name={viewer.name} action={changeNameAction} />
      </FormSection>
      <FormSection
        title="Password"
        about="Changing it signs you out everywhere else; here you are signed in again with the new one."
      >
        <PasswordForm email={viewer.email} action={changePasswordAction} hint={PASSWORD_HINT} />
      </FormSection>
    </SiteFrame>
  )
}
