import 'server-only'
import type { Kysely } from 'kysely'
import type { ViewsOfTable } from '@/components/table/saved-views'
import type { DB } from '@/db/schema'
import { savedViews, type TablePage } from '@/lib/work/catalogue/saved-views'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { changeViewAction, deleteViewAction, saveViewAction } from './view-actions'

/** What the table of a page needs to show, save and change views. */
export async function viewsOf(db: Kysely<DB>, permit: CampaignPermit<'read'>, page: TablePage): Promise<ViewsOfTable> {
  const { slug } = permit.campaign
  return {
    ...(await savedViews(db, permit, page)),
    save: saveViewAction.bind(null, slug, page),
    change: changeViewAction.bind(null, slug, page),
    remove: deleteViewAction.bind(null, slug, page),
  }
}
