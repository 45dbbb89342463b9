import 'server-only'
import { notFound } from 'next/navigation'
import { permitSite, type SitePermit } from '@/lib/work/people/permission'
import { requireViewer } from '@/lib/work/people/session'

/** For pages of administrators: signed out goes to sign in and comes back, anybody else gets the not-found page. */
export async function permitSitePage(path: string): Promise<SitePermit> {
  const viewer = await requireViewer(path)
  if (!viewer.isAdmin) notFound()
  return permitSite(viewer)
}
