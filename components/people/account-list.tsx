import { counted, day } from '@/components/campaigns/in-words'
import type { Account } from '@/lib/work/people/accounts'
import { ConfirmButton } from './confirm-button'
import type { FormAction } from './use-kept-form'

/** Every account, with the one thing that can be changed for others: whether it is an administrator's. */
export function AccountList({
  accounts,
  ownId,
  setAdministrator,
}: {
  accounts: Account[]
  ownId: number
  setAdministrator: (personId: number, isAdmin: boolean) => FormAction
}) {
  return (
    <ul className="border-t border-line">
      {accounts.map((account) => {
        const isAdmin = account.isAdmin === 1
        const name = account.id === ownId ? 'yourself' : account.name
        return (
          <li key={account.id} className="flex flex-wrap items-center gap-x-6 gap-y-1 border-b border-line py-2.5">
            <div className="min-w-0 flex-1 basis-64">
              <span className="font-semibold">{account.name}</span>
              {account.id === ownId ? <span className="text-mute"> (you)</span> : null}
              {isAdmin ? (
                <span className="ml-2 rounded-full border border-lamp/70 px-2 text-note text-lamp">administrator</span>
              ) : null}
              <span className="block break-all text-note text-mute">{account.email}</span>
            </div>
            <span className="text-note text-mute">
              {account.campaigns ? counted(account.campaigns, 'campaign') : 'no campaign'}, since{' '}
              {day(account.createdAt)}
            </span>
            {isAdmin ? (
              <ConfirmButton
                label="Take back"
                name={`Take the administrator’s rights from ${name}`}
                question={`Take the administrator’s rights from ${name}?`}
                consequence="Accounts and outbox close to them. Their campaigns and roles stay."
                confirm="Take them back"
                action={setAdministrator(account.id, false)}
              />
            ) : (
              <ConfirmButton
                label="Make administrator"
                name={`Make ${name} an administrator`}
                question={`Make ${name} an administrator?`}
                consequence="Administrators read the outbox, create campaigns and make other administrators. They see no campaign that they are not in."
                confirm="Make administrator"
                action={setAdministrator(account.id, true)}
              />
            )}
          </li>
        )
      })}
    </ul>
  )
}
