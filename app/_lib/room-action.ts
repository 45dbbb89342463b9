import 'server-only'
import { revalidatePath } from 'next/cache'
import { redirect } from 'next/navigation'
import { Problem } from '@/lib/platform/problems/problem'
import { failedForm, type FormState } from './form-state'

/** What was done, in a sentence; or the state of the form; or where the person goes next. */
type Done<State> = string | State | { goTo: string }

/**
 * What a form asks for in a campaign: may this person, do it, and have every page of the campaign read anew. A refusal becomes the
 * form's message. Where somebody was quicker (409) the pages are read anew too, so that what was not seen comes with the refusal.
 */
export async function roomAction<Permitted, State extends FormState = FormState>(
  permit: (slug: string) => Promise<Permitted>,
  slug: string,
  form: FormData,
  work: (permitted: Permitted) => Promise<Done<State>>,
): Promise<State | FormState> {
  const pagesAnew = () => revalidatePath(`/campaigns/${slug}`, 'layout')
  try {
    const done = await work(await permit(slug))
    pagesAnew()
    if (typeof done === 'string') return { done }
    if ('goTo' in done) redirect(done.goTo)
    return done
  } catch (error) {
    if (error instanceof Problem && error.status === 409) pagesAnew()
    return failedForm(error, form)
  }
}
