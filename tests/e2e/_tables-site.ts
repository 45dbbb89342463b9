import { expect, vi } from 'vitest'
import { changeRule } from '@/lib/work/campaigns/change-settings'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { permitCampaign } from '@/lib/work/people/permission'
import { candidateName } from '@/tests/_support/survey-files'
import { EMAIL, signInCookie, SLUG } from '@/tests/_support/survey-site'
import { openGradingRoom, type GradingRoom } from './_grading-room'

/** The first is a calibration stamp; the second and third lie seven arcseconds apart, across RA 0. */
const PLACES = [
  [200, 0],
  [359.999, 5],
  [0.001, 5],
  [40, 12],
  [80, 12],
  [120, -30],
]
export const NAMES = PLACES.map((_, index) => candidateName(index))
/** Curlew has judged the second to the fourth; the fifth is confirmed by others, the sixth is open. */
const GRADES: [who: string, candidate: number, grade: string, remark?: string][] = [
  ...[1, 2].flatMap((candidate) =>
    ['avocet', 'curlew', 'dunlin'].map((who) => [who, candidate, 'A'] as [string, number, string]),
  ),
  ...['avocet', 'curlew', 'dunlin'].map((who) => [who, 3, 'N'] as [string, number, string]),
  ['avocet', 4, 'A'],
  ['dunlin', 4, 'A', 'A knot north of the arc'],
]

/** Candidates here and there on the sky, graded and judged by the mean. */
export async function openTables(): Promise<GradingRoom> {
  const room = await openGradingRoom(PLACES.length, 1)
  const candidates = () => room.db.selectFrom('candidate').select(['id', 'name', 'truth']).execute()
  await vi.waitFor(async () => expect((await candidates()).find(({ name }) => name === NAMES[0])?.truth).toBe('lens'), {
    timeout: 30_000,
    interval: 300,
  })
  const idOf = new Map((await candidates()).map(({ id, name }) => [name, id]))
  for (const [index, [ra_deg, dec_deg]] of PLACES.entries()) {
    await room.db.updateTable('candidate').set({ ra_deg, dec_deg }).where('name', '=', NAMES[index]).execute()
  }
  const avocet = { id: room.idOf.avocet, name: 'avocet', email: EMAIL, isAdmin: true }
  const lead = await permitCampaign(room.db, avocet, SLUG, 'lead')
  await changeRule(room.db, lead, RuleInput.parse({ leastGrades: 2 }))
  const api = `${room.server.url}/api/campaigns/${SLUG}`
  for (const [who, candidate, grade, remark] of GRADES) {
    const headers = {
      cookie: await signInCookie(room.server.url, `${who}@saltmarsh.test`),
      'content-type': 'application/json',
    }
    const url = `${api}/candidates/${idOf.get(NAMES[candidate])}/grade`
    const answer = await fetch(url, { method: 'PUT', headers, body: JSON.stringify({ grade, remark }) })
    expect(answer.status, `${who} on ${NAMES[candidate]}`).toBeLessThan(300)
  }
  const run = await fetch(`${api}/consensus`, {
    method: 'POST',
    headers: { cookie: await signInCookie(room.server.url) },
  })
  expect(run.ok).toBe(true)
  return room
}
