import 'server-only'
import { getServerSession } from 'next-auth'
import { headers } from 'next/headers'
import { redirect } from 'next/navigation'
import { cache } from 'react'
import { findPerson, hasAdministrator } from '@/db/queries/people'
import { database } from '@/lib/platform/database'
import { ASKED_PATH_HEADER } from './asked-path'
import { authOptions } from './auth-options'
import type { Viewer } from './viewer'

/** The signed-in person of this request, read once per request, or null. An ended session and a left account are null. */
export const getViewer = cache(async (): Promise<Viewer | null> => {
  const session = await getServerSession(authOptions())
  if (!session?.personId) return null
  const person = await findPerson(await database(), session.personId)
  if (!person || person.left_at !== null || person.email === null || person.session_epoch !== session.epoch) return null
  return { id: person.id, name: person.name, email: person.email, isAdmin: person.is_admin === 1 }
})

/**
 * For pages: sends a signed-out visitor to the sign-in page and back afterwards, to the address asked for (`returnTo` where none
 * is known); on a site without administrator, to make one.
 */
export async function requireViewer(returnTo: string): Promise<Viewer> {
  const viewer = await getViewer()
  if (!viewer && !(await hasAdministrator(await database()))) redirect('/welcome')
  if (viewer) return viewer
  const asked = (await headers()).get(ASKED_PATH_HEADER) ?? returnTo
  redirect(`/signin?next=${encodeURIComponent(asked)}`)
}
