import path from 'node:path'
import { openDatabase } from '@/db/connection'
import { migrateToLatest } from '@/db/migrator'
import { insertPerson } from '@/db/queries/people'
import { CampaignInput } from '@/lib/work/campaigns/campaign-input'
import { createCampaign } from '@/lib/work/campaigns/create-campaign'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { hashPassword } from '@/lib/work/people/passwords'

/** A site with one lead and one campaign of bands g, r, i in a data folder, and what has come of its intake. */
export const SLUG = 'wide-search'
export const EMAIL = 'avocet@saltmarsh.test'
export const PASSWORD = 'mud between the toes'

const open = (dataFolder: string) => openDatabase(path.join(dataFolder, 'ringside.sqlite'))

export async function seedSite(dataFolder: string): Promise<void> {
  const db = open(dataFolder)
  await migrateToLatest(db)
  const now = new Date().toISOString()
  const passwordHash = await hashPassword(PASSWORD)
  const id = await insertPerson(db, { email: EMAIL, name: 'avocet', passwordHash, isAdmin: true, now })
  const lead = { id, name: 'avocet', email: EMAIL, isAdmin: true }
  const input = { name: 'Wide search', survey: 'Saltmarsh Wide Survey', acronym: 'SWS', bands: 'g r i' }
  await createCampaign(db, lead, CampaignInput.parse(input), RuleInput.parse({}))
  await db.destroy()
}

const cookiesOf = (response: Response): string =>
  response.headers
    .getSetCookie()
    .map((cookie) => cookie.split(';')[0])
    .join('; ')

/** The lead's session, or that of somebody with the same password, as a Cookie header. It outlives the server, whose secret is in the data folder. */
export async function signInCookie(url: string, email = EMAIL): Promise<string> {
  const asked = await fetch(`${url}/api/auth/csrf`)
  const { csrfToken } = (await asked.json()) as { csrfToken: string }
  const response = await fetch(`${url}/api/auth/callback/credentials`, {
    method: 'POST',
    redirect: 'manual',
    headers: { cookie: cookiesOf(asked), 'content-type': 'application/x-www-form-urlencoded' },
    body: new URLSearchParams({ csrfToken, email, password: PASSWORD, json: 'true' }),
  })
  const cookie = cookiesOf(response)
  if (!cookie.includes('session-token'))
    throw new Error(`Signing in failed with ${response.status}: ${await response.text()}`)
  return cookie
}

/** Everything that intake leaves, without ids and times, in a fixed order. */
export async function intakeResult(dataFolder: string) {
  const db = open(dataFolder)
  try {
    const files = await db
      .selectFrom('file')
      .select(['name', 'sha256', 'fate', 'reason'])
      .orderBy('name')
      .orderBy('sha256')
      .execute()
    const planes = await db
      .selectFrom('plane')
      .innerJoin('candidate', 'candidate.id', 'plane.candidate_id')
      .innerJoin('file', 'file.id', 'plane.file_id')
      .select(['candidate.name as candidate', 'plane.band', 'file.name', 'plane.background', 'plane.noise'])
      .orderBy('candidate.name')
      .orderBy('plane.band')
      .execute()
    const candidates = await db.selectFrom('candidate').select(['name', 'ra_deg', 'dec_deg']).orderBy('name').execute()
    const stamps = await db
      .selectFrom('stamp')
      .innerJoin('candidate', 'candidate.id', 'stamp.candidate_id')
      .select(['candidate.name as candidate', 'stamp.view', 'stamp.sha256'])
      .orderBy('candidate.name')
      .orderBy('stamp.view')
      .execute()
    const imaged = await db.selectFrom('candidate').select('name').where('imaged_at', 'is not', null).execute()
    return { files, planes, candidates, stamps, imaged: imaged.length }
  } finally {
    await db.destroy()
  }
}
