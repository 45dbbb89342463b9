import path from 'node:path'
import type { Kysely } from 'kysely'
import type { Browser, BrowserContext, Page } from 'playwright-core'
import { openDatabase } from '@/db/connection'
import { findPersonByEmail, upsertMembership } from '@/db/queries/people'
import type { DB } from '@/db/schema'
import { CampaignInput } from '@/lib/work/campaigns/campaign-input'
import { createCampaign } from '@/lib/work/campaigns/create-campaign'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { candidateName, fullSearch } from '@/tests/_support/survey-files'
import { EMAIL, signInCookie, SLUG } from '@/tests/_support/survey-site'
import { startBenchSite } from './_bench-site'
import { collectErrors } from './_browser'
import type { TestServer } from './_server'

export const NEW_SLUG = 'new-search'

export interface GradingRoom {
  server: TestServer
  db: Kysely<DB>
  campaignId: number
  idOf: Record<'avocet' | 'curlew' | 'dunlin' | 'egret', number>
  /** A page of somebody who is signed in, with what it throws or logs. */
  enter: (browser: Browser, name: string) => Promise<{ page: Page; context: BrowserContext; errors: string[] }>
}

/**
 * A site with a lead (avocet), two graders (curlew, dunlin) and a viewer (egret); one campaign with so many candidates, of which the
 * first are calibration stamps by a manifest, and one campaign that has nothing yet.
 */
export async function openGradingRoom(candidates: number, stamps: number): Promise<GradingRoom> {
  const server = await startBenchSite(candidates, fullSearch)
  const db = openDatabase(path.join(server.dataFolder, 'ringside.sqlite'))
  const lead = await findPersonByEmail(db, EMAIL)
  if (!lead) throw new Error('The lead is missing.')
  const { id: campaignId } = await db.selectFrom('campaign').select('id').executeTakeFirstOrThrow()
  const now = new Date().toISOString()
  const idOf = { avocet: lead.id, curlew: 0, dunlin: 0, egret: 0 }
  const roles = { curlew: 'grader', dunlin: 'grader', egret: 'viewer' } as const
  for (const [order, name] of (['curlew', 'dunlin', 'egret'] as const).entries()) {
    const person = { email: `${name}@saltmarsh.test`, name, password_hash: lead.password_hash, created_at: now }
    const { id } = await db
      .insertInto('person')
      .values({ ...person, left_at: null })
      .returning('id')
      .executeTakeFirstOrThrow()
    idOf[name] = id
    await upsertMembership(db, { campaignId, personId: id, role: roles[name], pseudonym: `G0${order + 2}`, now })
  }
  const viewer = { id: lead.id, name: 'avocet', email: EMAIL, isAdmin: true }
  const input = { name: 'New search', survey: 'Saltmarsh Wide Survey', acronym: 'SWS', bands: 'g r i' }
  await createCampaign(db, viewer, CampaignInput.parse(input), RuleInput.parse({}))
  await sendTruths(server, stamps)
  return {
    server,
    db,
    campaignId,
    idOf,
    enter: async (browser, name) => {
      const context = await browser.newContext({ viewport: { width: 1440, height: 900 } })
      const [first, ...others] = (await signInCookie(server.url, `${name}@saltmarsh.test`)).split('; ')
      await context.addCookies(
        [first, ...others].map((cookie) => {
          const [key, ...value] = cookie.split('=')
          return { name: key, value: value.join('='), url: server.url }
        }),
      )
      const page = await context.newPage()
      return { page, context, errors: collectErrors(page) }
    },
  }
}

/** Half of them are lenses. */
async function sendTruths(server: TestServer, stamps: number): Promise<void> {
  const lines = Array.from({ length: stamps }, (_, index) =>
    index % 2 === 0
      ? `${candidateName(index)},lens,"Two arcs of one blue source, opposite each other around the red galaxy."`
      : `${candidateName(index)},0,"A galaxy with a tail, whose colour is that of its disc."`,
  )
  const headers = { cookie: await signInCookie(server.url) }
  const url = `${server.url}/api/campaigns/${SLUG}/files/known.csv`
  const body = ['candidate,truth,explanation', ...lines].join('\n')
  const answer = await fetch(url, { method: 'PUT', headers, body })
  if (!answer.ok) throw new Error(`known.csv: ${answer.status} ${await answer.text()}`)
}

/** A campaign's settings, as the form of the settings writes them. */
export async function setCampaign(
  { db, campaignId }: GradingRoom,
  settings: Partial<{ uses_sheet: 0 | 1; practice_wanted: number; calibration_share: number }>,
): Promise<void> {
  await db.updateTable('campaign').set(settings).where('id', '=', campaignId).execute()
}
