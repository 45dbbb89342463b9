import 'server-only'
import type { Kysely } from 'kysely'
import { z } from 'zod'
import {
  countOwnViews,
  deleteSavedView,
  findOwnView,
  insertSavedView,
  listSavedViews,
  updateSavedView,
} from '@/db/queries/saved-views'
import type { DB } from '@/db/schema'
import type { SavedView } from '@/db/schema/listing'
import { isoTime } from '@/lib/platform/clock'
import { forbidden, invalid, notFound } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'

export type TablePage = SavedView['page']

export interface SavedViewShown {
  id: number
  name: string
  /** The query of the table's address. */
  query: string
  shared: boolean
  /** Who saved it, where that is somebody else: the name for leads, the pseudonym for everybody else. */
  by: string | null
}

export interface SavedViews {
  own: SavedViewShown[]
  /** Of people who lead the campaign. */
  shared: SavedViewShown[]
  mayShare: boolean
}

/** A view is an address, and addresses that browsers take are not longer. */
const LONGEST_QUERY = 4000
const MOST_VIEWS = 60

const name = z
  .string('Give the view a name.')
  .trim()
  .min(1, 'Give the view a name.')
  .max(60, 'A name has at most 60 letters.')
const shared = z.union([z.boolean(), z.literal('on').transform(() => true)]).default(false)

export const SaveViewInput = z.object({
  name,
  query: z.string().max(LONGEST_QUERY, 'These filters are too long to be saved. Take some off.').default(''),
  shared,
})
export const ChangeViewInput = z.object({ id: z.coerce.number().int().positive(), name, shared })

/** The views that a person may choose from: their own, and those that leads share. */
export async function savedViews(db: Kysely<DB>, permit: CampaignPermit<'read'>, page: TablePage): Promise<SavedViews> {
  const { campaign, viewer, role } = permit
  const rows = await listSavedViews(db, campaign.id, page, viewer.id)
  const shown = (row: (typeof rows)[number]): SavedViewShown => {
    const { id, name, query, shared, person_id } = row
    const by = role === 'lead' ? row.by : (row.pseudonym ?? 'a lead')
    return { id, name, query, shared: shared === 1, by: person_id === viewer.id ? null : by }
  }
  return {
    own: rows.filter((row) => row.person_id === viewer.id).map(shown),
    shared: rows.filter((row) => row.person_id !== viewer.id).map(shown),
    mayShare: role === 'lead',
  }
}

/** Keeps a table under a name of the person's own. @throws Problem 422 for a name that they have, 403 to share without the lead. */
export async function saveView(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  page: TablePage,
  input: z.infer<typeof SaveViewInput>,
): Promise<{ id: number }> {
  mustBeLeadToShare(permit, input.shared)
  const { campaign, viewer } = permit
  return db.transaction().execute(async (transaction) => {
    await refuseTwin(transaction, permit, page, input.name)
    if ((await countOwnViews(transaction, campaign.id, viewer.id, page)) >= MOST_VIEWS) {
      throw invalid(`You have ${MOST_VIEWS} views of this table already. Delete one that you do not need any more.`)
    }
    const id = await insertSavedView(transaction, {
      campaignId: campaign.id,
      personId: viewer.id,
      page,
      ...input,
      now: isoTime(),
    })
    return { id }
  })
}

/** Renames a view, shares it or takes it back. @throws Problem 404 for somebody else's, 422 for a name in use, 403 to share. */
export async function changeView(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  input: z.infer<typeof ChangeViewInput>,
): Promise<void> {
  mustBeLeadToShare(permit, input.shared)
  await db.transaction().execute(async (transaction) => {
    const view = await ownView(transaction, permit, input.id)
    await refuseTwin(transaction, permit, view.page, input.name, view.id)
    await updateSavedView(transaction, view.id, { name: input.name, shared: input.shared, now: isoTime() })
  })
}

/** @throws Problem 404 for somebody else's. */
export async function deleteView(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  id: number,
): Promise<{ name: string }> {
  return db.transaction().execute(async (transaction) => {
    const view = await ownView(transaction, permit, id)
    await deleteSavedView(transaction, view.id)
    return { name: view.name }
  })
}

async function ownView(db: Kysely<DB>, { campaign, viewer }: CampaignPermit<'read'>, id: number): Promise<SavedView> {
  const view = await findOwnView(db, campaign.id, viewer.id, { id })
  if (!view) throw notFound('view of yours')
  return view
}

function mustBeLeadToShare({ role }: CampaignPermit<'read'>, shared: boolean): void {
  if (shared && role !== 'lead') throw forbidden('Only a lead of this campaign shares views. Save it for yourself.')
}

async function refuseTwin(
  db: Kysely<DB>,
  { campaign, viewer }: CampaignPermit<'read'>,
  page: TablePage,
  name: string,
  except?: number,
): Promise<void> {
  const twin = await findOwnView(db, campaign.id, viewer.id, { page, name })
  if (!twin || twin.id === except) return
  const sentence = `You have a view called “${twin.name}” already. Choose another name, or change that one.`
  throw invalid(sentence, [{ name: 'name', reason: sentence }])
}
