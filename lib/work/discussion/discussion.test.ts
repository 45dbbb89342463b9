import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import type { GradeLetter } from '@/db/schema/grading'
import { candidateNumber } from '@/lib/work/campaigns/candidate-number'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { endMembership } from '@/lib/work/people/change-membership'
import type { Viewer } from '@/lib/work/people/viewer'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { AskInput } from './ask-input'
import { askLooks } from './ask-looks'
import { mentionsOfMe, waitingFor } from './list-mentions'
import { LONGEST_MESSAGE, MessageInput } from './message-input'
import { postMessage } from './post-message'
import { readThread } from './read-thread'
import { sentInWords } from './sent-in-words'

let scenario: Scenario
let candidate: number
let curlew: Viewer
let dunlin: Viewer
let plover: Viewer
beforeEach(async () => {
  scenario = await makeScenario()
  ;[curlew, dunlin, plover] = scenario.graders
  candidate = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS-1')
  await grade(curlew, 'B')
  await grade(dunlin, 'N')
})
afterEach(() => scenario.db.destroy())

async function grade(person: Viewer, letter: GradeLetter) {
  const permit = await scenario.permit(person, 'grade')
  return recordGrade(scenario.db, permit, candidate, GradeInput.parse({ grade: letter }))
}
async function say(person: Viewer, body: string, id = candidate) {
  return postMessage(scenario.db, await scenario.permit(person, 'grade'), id, MessageInput.parse({ body }))
}
const read = async (person: Viewer, id = candidate) =>
  readThread(scenario.db, await scenario.permit(person, 'read'), id)
const waiting = async (person: Viewer) => waitingFor(scenario.db, await scenario.permit(person, 'read'))
const mentions = async (person: Viewer) => mentionsOfMe(scenario.db, await scenario.permit(person, 'read'))
const mails = () => scenario.db.selectFrom('mail').select(['recipient', 'body']).orderBy('id').execute()
const rows = () => scenario.db.selectFrom('message').selectAll().execute()

describe('the discussion of a candidate', () => {
  it('is read by leads with names, by viewers and by graders who have judged it with pseudonyms', async () => {
    await say(scenario.lead, 'Is this a ring, @curlew? https://marsh.test/atlas')
    await say(curlew, 'I think so, @G01.')
    expect((await read(scenario.lead))?.messages).toMatchObject([
      { by: 'avocet', own: true, parts: [{ text: 'Is this a ring, ' }, { label: 'curlew', you: false }, {}, {}] },
      { by: 'curlew', own: false, parts: [{}, { label: 'avocet', you: true }, {}] },
    ])
    for (const person of [scenario.reader, dunlin]) {
      const thread = await read(person)
      expect(thread?.messages.map(({ by }) => by)).toEqual(['G01', 'G02'])
      expect(JSON.stringify(thread)).not.toMatch(/avocet|curlew/)
    }
    expect((await read(scenario.reader))?.mayWrite).toBe(false)
  })

  it('is closed to a grader before an own judgement, for which ‘cannot judge’ is none, and while a look is asked', async () => {
    await say(scenario.lead, 'A ring.')
    expect(await read(plover)).toBeNull()
    await grade(plover, 'U')
    expect(await read(plover)).toBeNull()
    const lead = await scenario.permit(scenario.lead, 'lead')
    await askLooks(scenario.db, lead, candidate, AskInput.parse({ people: [curlew.id] }))
    expect(await read(curlew)).toBeNull()
    expect((await read(dunlin))?.messages).toHaveLength(1)
  })

  it('counts as having been shown the others’ judgement', async () => {
    await read(curlew)
    await expect(grade(curlew, 'N')).rejects.toMatchObject({ type: 'judgement-seen' })
  })

  it('offers a lead names with who can read along, a grader pseudonyms, and a viewer nobody', async () => {
    expect((await read(scenario.lead))?.mentionable).toEqual([
      { label: 'curlew', lead: false, reads: true },
      { label: 'dunlin', lead: false, reads: true },
      { label: 'plover', lead: false, reads: false },
      { label: 'whimbrel', lead: false, reads: false },
    ])
    expect((await read(curlew))?.mentionable).toEqual([
      { label: 'G01', lead: true, reads: null },
      { label: 'G03', lead: false, reads: null },
      { label: 'G04', lead: false, reads: null },
      { label: 'G05', lead: false, reads: null },
    ])
    expect((await read(scenario.reader))?.mentionable).toEqual([])
  })

  it('of a calibration stamp is not there for a viewer, and like any other for a grader', async () => {
    await scenario.db.updateTable('candidate').set({ truth: 'lens' }).execute()
    expect(await read(scenario.reader)).toBeNull()
    await say(curlew, 'Hm.')
    expect((await read(dunlin))?.messages).toHaveLength(1)
  })

  it('only grows: the database refuses to change or delete a message', async () => {
    await say(curlew, 'A ring.')
    await expect(scenario.db.updateTable('message').set({ body: 'x' }).execute()).rejects.toThrow(/never changed/)
    await expect(scenario.db.deleteFrom('message').execute()).rejects.toThrow(/never changed/)
  })
})

describe('a mention', () => {
  it('is written to the person with the message under the name that they may see, and waits until it is read', async () => {
    await say(dunlin, 'Look at the counter-image, @G01 and @G02.')
    expect(await mails()).toMatchObject([
      { recipient: 'avocet@saltmarsh.test', body: expect.stringContaining('dunlin mentions you') },
      { recipient: 'curlew@saltmarsh.test', body: expect.stringContaining('G03 mentions you') },
    ])
    expect((await mails())[0].body).toContain('Look at the counter-image, @avocet and @curlew.')
    expect((await mails())[1].body).toContain(`/candidates/${candidate}#discussion`)
    expect(await waiting(curlew)).toEqual({ asked: 0, mentions: 1 })
    expect(await mentions(curlew)).toMatchObject([
      { candidate: 'SWS-1', unread: true, message: { by: 'G03', text: 'Look at the counter-image, @G01 and @G02.' } },
    ])
    await read(curlew)
    expect(await waiting(curlew)).toEqual({ asked: 0, mentions: 0 })
    expect((await mentions(curlew))[0].unread).toBe(false)
    expect(await waiting(scenario.lead)).toEqual({ asked: 0, mentions: 1 })
  })

  it('of a grader who has not judged it invites to grade first and tells neither who wrote nor what', async () => {
    await say(scenario.lead, '@plover, everybody says N here.')
    const [mail] = await mails()
    expect(mail).toMatchObject({ recipient: 'plover@saltmarsh.test' })
    expect(mail.body).toContain('opens once you have graded the candidate yourself')
    expect(mail.body).not.toMatch(/avocet|everybody|says/)
    expect(mail.body).toContain(`in the discussion of ${candidateNumber(candidate)} in`)
    expect(mail.body).not.toContain('SWS-1')
    const [waitingMention] = await mentions(plover)
    expect(waitingMention).toMatchObject({ candidate: candidateNumber(candidate), message: null, unread: true })
    await read(plover)
    expect((await waiting(plover)).mentions).toBe(1)
    await grade(plover, 'N')
    expect((await mentions(plover))[0].message?.text).toBe('@G04, everybody says N here.')
  })

  it('whose mail carries the message has told a grader of the others’ judgement: their grade stands, and no look is asked', async () => {
    await say(dunlin, '@G02 four of us say N')
    await expect(grade(curlew, 'N')).rejects.toMatchObject({ type: 'judgement-seen' })
    const lead = await scenario.permit(scenario.lead, 'lead')
    const ask = askLooks(scenario.db, lead, candidate, AskInput.parse({ people: [curlew.id] }))
    await expect(ask).rejects.toMatchObject({ type: 'judgement-seen' })
  })

  it('whose mail tells nothing leaves a grader free: who has not judged it, or is asked for a look', async () => {
    await grade(plover, 'U')
    const lead = await scenario.permit(scenario.lead, 'lead')
    await askLooks(scenario.db, lead, candidate, AskInput.parse({ people: [curlew.id] }))
    await say(scenario.lead, '@curlew and @plover, four of us say N')
    const bodies = (await mails()).map(({ body }) => body).join()
    expect(bodies).not.toContain('four of us')
    expect(await scenario.db.selectFrom('judgement_shown').selectAll().execute()).toEqual([])
    expect((await grade(plover, 'B')).replaced).toBeDefined()
  })

  it('of oneself, of a viewer, of somebody who has left, or of nobody here is just text', async () => {
    const lead = await scenario.permit(scenario.lead, 'lead')
    await endMembership(scenario.db, lead, plover.id)
    await say(scenario.lead, '@avocet @egret @G90 @plover @oystercatcher')
    expect(await mails()).toEqual([])
    expect(await scenario.db.selectFrom('mention').selectAll().execute()).toEqual([])
  })

  it('of a name that nobody has is sent as text, and the answer says so', async () => {
    expect(await say(scenario.lead, 'Ask @curlw, @curlew or a@b.example; @ G02.')).toMatchObject({
      mentioned: ['curlew'],
      unknown: ['curlw'],
    })
    expect(await mails()).toHaveLength(1)
    const told = await say(scenario.lead, '@nobody and @nobody. @avocet')
    expect(told).toMatchObject({ mentioned: [], unknown: ['nobody'] })
    expect(sentInWords(told)).toBe('Sent. No mail went to @nobody: no grader or lead goes by that name here.')
    expect(sentInWords(await say(scenario.lead, '@curlew!'))).toBe('Sent, with a mail to curlew.')
  })

  it('of the same person twice is one mail', async () => {
    await say(scenario.lead, '@curlew! @curlew?')
    expect(await mails()).toHaveLength(1)
  })
})

describe('a message is refused', () => {
  it('from a grader who has not judged the candidate', async () => {
    await expect(say(plover, 'Me too.')).rejects.toMatchObject({ status: 409, type: 'grade-first' })
    expect(await rows()).toEqual([])
  })

  it('from a viewer and from a stranger', async () => {
    await expect(scenario.permit(scenario.reader, 'grade')).rejects.toMatchObject({ status: 403 })
    await expect(scenario.permit(scenario.stranger, 'grade')).rejects.toMatchObject({ status: 404 })
  })

  it('on a candidate of another campaign', async () => {
    const there = await addImagedCandidate(scenario.db, scenario.otherCampaign, 'there')
    await expect(say(scenario.lead, 'Hm.', there)).rejects.toMatchObject({ status: 404 })
    expect(await read(scenario.lead, there)).toBeNull()
  })

  it('when it is empty, too long or holds what cannot be shown', () => {
    expect(() => MessageInput.parse({ body: ' \r\n ' })).toThrow(/Write something first/)
    expect(() => MessageInput.parse({ body: 'x'.repeat(LONGEST_MESSAGE + 1) })).toThrow(/at most 4000 characters/)
    expect(() => MessageInput.parse({ body: 'a\u0000b' })).toThrow(/cannot be shown/)
  })
})
