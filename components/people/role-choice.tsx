import type { Role } from '@/db/schema/people'

export const ROLE_LABEL: Record<Role, string> = { lead: 'lead', grader: 'grader', viewer: 'viewer' }

export const ROLE_MEANING: Record<Role, string> = {
  grader: 'Grades candidates; sees nobody else’s grade first.',
  viewer: 'Reads the catalogue and its evidence; grades nothing.',
  lead: 'Sets the campaign, uploads, invites, settles splits; may grade too.',
}

/** Radio buttons, because each role needs its sentence. */
export function RoleChoice({ error }: { error?: string }) {
  return (
    <fieldset className="flex flex-col gap-2">
      <legend className="mb-1 text-small font-semibold">As</legend>
      {(Object.keys(ROLE_MEANING) as Role[]).map((role) => (
        <label key={role} className="flex cursor-pointer items-start gap-2.5">
          <input
            type="radio"
            name="role"
            value={role}
            defaultChecked={role === 'grader'}
            aria-label={ROLE_LABEL[role]}
            aria-describedby={`role-${role}`}
            className="mt-0.5 size-5 shrink-0 accent-(--lamp)"
          />
          <span>
            <span className="font-semibold">{ROLE_LABEL[role]}</span>
            <span id={`role-${role}`} className="block text-note text-mute">
              {ROLE_MEANING[role]}
            </span>
          </span>
        </label>
      ))}
      {error ? <p className="text-note text-alarm">{error}</p> : null}
    </fieldset>
  )
}
