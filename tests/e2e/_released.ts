import path from 'node:path'
import { openDatabase } from '@/db/connection'
import { migrateToLatest } from '@/db/migrator'
import { insertPerson } from '@/db/queries/people'
import { BlobStore } from '@/lib/platform/storage/blob-store'
import { CampaignInput } from '@/lib/work/campaigns/campaign-input'
import { createCampaign } from '@/lib/work/campaigns/create-campaign'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { hashPassword } from '@/lib/work/people/passwords'
import { addReleaseAt } from '@/tests/_support/released-entries'

export const SLUG = 'north-field'
const LEAD = { email: 'avocet@saltmarsh.test', password: 'low tide at dawn' }
export const TOKEN = 'secret-of-the-link'
/** Entries of release 2: a row of them, a hundredth of a degree apart, over right ascension 0. */
export const ENTRIES = 120
export const placeOf = (entry: number) => [(359.5 + (entry - 1) / 100) % 360, 2] as const

/** A grey pixel. */
const PNG = Buffer.from(
  'iVBORw0KGgoAAAANSUhEUgAAAAEAAAABCAAAAAA6fptVAAAACklEQVR4nGNoAAAAggCBd81ytgAAAABJRU5ErkJggg==',
  'base64',
)

/**
 * Releases in a data folder: 1 public and withdrawn by 4; 2 public, the newest that stands; 3 by link; 5 private. Written
 * straight into the tables: how they are made is tested elsewhere.
 */
export async function makeReleases(dataFolder: string): Promise<{ picture: string }> {
  const db = openDatabase(path.join(dataFolder, 'ringside.sqlite'))
  await migrateToLatest(db)
  const now = '2026-01-01T00:00:00.000Z'
  const passwordHash = await hashPassword(LEAD.password)
  const id = await insertPerson(db, { email: LEAD.email, name: 'avocet', passwordHash, isAdmin: true, now })
  const lead = { id, name: 'avocet', email: LEAD.email, isAdmin: true }
  const input = { name: 'North field', survey: 'Saltmarsh Wide Survey', acronym: 'SWS', bands: 'g r i' }
  const campaign = await createCampaign(db, lead, CampaignInput.parse(input), RuleInput.parse({}))
  const blobs = new BlobStore(path.join(dataFolder, 'blobs'), path.join(dataFolder, 'incoming'))
  const { sha256: picture } = await blobs.put(PNG)
  const places = Array.from({ length: ENTRIES }, (_, at) => placeOf(at + 1))
  const add = (number: number, more: NonNullable<Parameters<typeof addReleaseAt>[4]>, where = places.slice(0, 3)) =>
    addReleaseAt(db, campaign, id, where, { number, picture, ...more })
  const first = await add(1, { title: 'First look' })
  await add(2, { title: 'Second look' }, places)
  await add(3, { access: 'link', token: TOKEN, title: 'For the follow-up' })
  await add(4, { kind: 'retraction', correctsId: first, statement: 'Wrong positions.', title: 'Withdrawal' }, [])
  await add(5, { access: 'private', title: 'Not yet' })
  await db.destroy()
  return { picture }
}
