import { describe, expect, it } from 'vitest'
import { decisionRows, giveGrade, giveGrades } from '@/lib/work/consensus/_give-grade'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { parseRulingForm, type RulingInput } from './ruling-input'
import { ruleOnCandidate } from './rule-on-candidate'

const RULE = { gradesWanted: 4, leastGrades: 3, confirmMean: 2, setAsideMean: 1, splitSpread: 1 }
const CONFIRM: RulingInput = { outcome: 'confirmed', grade: 'B', reason: 'The counter-image is real.' }
const SET_ASIDE: RulingInput = { outcome: 'set aside', grade: null, reason: 'A tidal tail.' }
const REOPEN: RulingInput = { outcome: 'open', grade: null, reason: 'Look again in deeper data.' }
const BY_VERDICT: RulingInput = { outcome: 'by verdict', grade: null, reason: 'The new grades settle it.' }

async function splitCase() {
  const scenario = await makeScenario(RULE)
  const id = await addImagedCandidate(scenario.db, scenario.campaign, 'torn', { raDeg: 10, decDeg: -5 })
  await giveGrades(scenario.db, scenario.campaign, id, scenario.graders, 'AANN')
  const lead = await scenario.permit(scenario.lead, 'lead')
  await runConsensus(scenario.db, lead)
  return { ...scenario, id, lead, leadPerson: scenario.lead }
}

async function candidateOf({ db }: Pick<Scenario, 'db'>, id: number) {
  return db.selectFrom('candidate').selectAll().where('id', '=', id).executeTakeFirstOrThrow()
}

describe('a ruling', () => {
  it('confirms a split: state, change, entry, designation and audit event name the ruling as their cause', async () => {
    const { db, id, lead } = await splitCase()
    const { rulingId } = await ruleOnCandidate(db, lead, id, { ...CONFIRM, reason: '  The counter-image is real. ' })
    const ruling = await db.selectFrom('ruling').selectAll().executeTakeFirstOrThrow()
    expect(ruling).toMatchObject({
      id: rulingId,
      outcome: 'confirmed',
      grade: 'B',
      reason: 'The counter-image is real.',
    })
    expect(await candidateOf({ db }, id)).toMatchObject({
      state: 'confirmed',
      state_cause: 'ruling',
      state_cause_id: rulingId,
      ruling_id: rulingId,
    })
    const change = await db.selectFrom('state_change').selectAll().orderBy('id', 'desc').executeTakeFirstOrThrow()
    expect(change).toMatchObject({ from_state: 'split', to_state: 'confirmed', cause: 'ruling', cause_id: rulingId })
    expect(await db.selectFrom('entry').selectAll().execute()).toMatchObject([
      { candidate_id: id, event: 'entered', cause: 'ruling', cause_id: rulingId },
    ])
    expect(await db.selectFrom('designation').select('designation').execute()).toEqual([
      { designation: 'SWS J004000.00-050000.0' },
    ])
    const event = await db.selectFrom('audit_event').selectAll().orderBy('id', 'desc').executeTakeFirstOrThrow()
    expect(event).toMatchObject({ action: 'rulings.ruled', subject: 'torn', person_id: lead.viewer.id })
  })

  it('stands over later verdicts until it is handed back to the verdict', async () => {
    const { db, id, lead, campaign, graders } = await splitCase()
    await ruleOnCandidate(db, lead, id, SET_ASIDE)
    const rows = await db.selectFrom('grade').selectAll().where('candidate_id', '=', id).orderBy('id').execute()
    await giveGrade(db, campaign, id, graders[2], 'A', { replaces: rows[2].id })
    await giveGrade(db, campaign, id, graders[3], 'B', { replaces: rows[3].id })
    await runConsensus(db, lead)
    expect(await candidateOf({ db }, id)).toMatchObject({ state: 'set aside', state_cause: 'ruling' })
    const verdict = await db.selectFrom('verdict').selectAll().orderBy('id', 'desc').executeTakeFirstOrThrow()
    expect(verdict.outcome).toBe('confirmed')

    const back = await ruleOnCandidate(db, lead, id, BY_VERDICT)
    expect(back.state).toBe('confirmed')
    expect(await candidateOf({ db }, id)).toMatchObject({ state_cause: 'verdict', state_cause_id: verdict.id })
    const change = await db.selectFrom('state_change').selectAll().orderBy('id', 'desc').executeTakeFirstOrThrow()
    expect(change).toMatchObject({ to_state: 'confirmed', cause: 'ruling', cause_id: back.rulingId })

    await giveGrade(db, campaign, id, graders[0], 'N', { occasion: 'asked' })
    await runConsensus(db, lead)
    expect(await candidateOf({ db }, id)).toMatchObject({ state: 'split', state_cause: 'verdict' })
  })

  it('is reversed by another, and every one of them stays readable', async () => {
    const { db, id, lead } = await splitCase()
    for (const ruling of [CONFIRM, SET_ASIDE, REOPEN]) await ruleOnCandidate(db, lead, id, ruling)
    expect(await candidateOf({ db }, id)).toMatchObject({ state: 'open', state_cause: 'ruling' })
    const rulings = await db.selectFrom('ruling').select(['outcome', 'reason']).orderBy('id').execute()
    expect(rulings.map((row) => row.outcome)).toEqual(['confirmed', 'set aside', 'open'])
    const events = await db.selectFrom('entry').select('event').orderBy('id').execute()
    expect(events.map((row) => row.event)).toEqual(['entered', 'left'])
    expect(await db.selectFrom('designation').selectAll().execute()).toHaveLength(1)
  })

  it('on a candidate that no run has seen hands it back to open', async () => {
    const { db, campaign, lead } = await splitCase()
    const fresh = await addImagedCandidate(db, campaign, 'fresh')
    await ruleOnCandidate(db, lead, fresh, CONFIRM)
    expect(await ruleOnCandidate(db, lead, fresh, BY_VERDICT)).toMatchObject({ state: 'open' })
    expect(await candidateOf({ db }, fresh)).toMatchObject({ state: 'open' })
  })
})

describe('a ruling is refused and nothing is written', () => {
  it.each<[string, Partial<RulingInput>, RegExp]>([
    ['without a reason', { reason: '' }, /Give a reason/],
    ['with blanks for a reason', { reason: ' \n\t ' }, /Give a reason/],
    ['with a reason of more than 2000 characters', { reason: 'x'.repeat(2001) }, /at most 2000/],
    ['that confirms without a grade', { grade: null }, /A, B or C/],
    ['that sets aside with a grade', { outcome: 'set aside', grade: 'A' }, /Only a confirmed candidate/],
    ['that confirms as N', { grade: 'N' as 'A' }, /A, B or C/],
  ])('%s', async (_, fault, sentence) => {
    const { db, id, lead } = await splitCase()
    const rows = await decisionRows(db)
    await expect(ruleOnCandidate(db, lead, id, { ...CONFIRM, ...fault })).rejects.toThrow(sentence)
    expect(await decisionRows(db)).toEqual(rows)
  })

  it('on a candidate of another campaign, as if it did not exist', async () => {
    const { db, lead, otherCampaign } = await splitCase()
    const there = await addImagedCandidate(db, otherCampaign, 'there')
    const rows = await decisionRows(db)
    await expect(ruleOnCandidate(db, lead, there, CONFIRM)).rejects.toMatchObject({ status: 404 })
    await expect(ruleOnCandidate(db, lead, 99_999, CONFIRM)).rejects.toMatchObject({ status: 404 })
    expect(await decisionRows(db)).toEqual(rows)
  })

  it('when another lead has ruled meanwhile, whose ruling would be overturned unread', async () => {
    const { db, id, lead } = await splitCase()
    const first = await ruleOnCandidate(db, lead, id, { ...CONFIRM, lastRulingSeen: null })
    const rows = await decisionRows(db)
    const unseen = ruleOnCandidate(db, lead, id, { ...SET_ASIDE, lastRulingSeen: null })
    await expect(unseen).rejects.toMatchObject({ status: 409, type: 'ruled-meanwhile', message: /avocet has ruled/ })
    expect(await decisionRows(db)).toEqual(rows)
    await ruleOnCandidate(db, lead, id, { ...SET_ASIDE, lastRulingSeen: first.rulingId })
    expect(await candidateOf({ db }, id)).toMatchObject({ state: 'set aside' })
  })

  it('that hands back to the verdict when no ruling stands', async () => {
    const { db, id, lead } = await splitCase()
    await expect(ruleOnCandidate(db, lead, id, BY_VERDICT)).rejects.toMatchObject({ type: 'no-ruling' })
    await ruleOnCandidate(db, lead, id, CONFIRM)
    await ruleOnCandidate(db, lead, id, BY_VERDICT)
    await expect(ruleOnCandidate(db, lead, id, BY_VERDICT)).rejects.toMatchObject({ type: 'no-ruling' })
  })

  it('from whoever is no lead: there is no permit to rule', async () => {
    const { permit, graders, reader, stranger } = await splitCase()
    await expect(permit(graders[0], 'lead')).rejects.toMatchObject({ status: 403 })
    await expect(permit(reader, 'lead')).rejects.toMatchObject({ status: 403 })
    await expect(permit(stranger, 'lead')).rejects.toMatchObject({ status: 404 })
  })

  it('when the catalogue cannot be written: the ruling is not kept without its state', async () => {
    const { db, id, lead } = await splitCase()
    const rows = await decisionRows(db)
    await db.schema.alterTable('entry').renameTo('entry_away').execute()
    await expect(ruleOnCandidate(db, lead, id, CONFIRM)).rejects.toThrow(/entry/)
    await db.schema.alterTable('entry_away').renameTo('entry').execute()
    expect(await decisionRows(db)).toEqual(rows)
  })
})

describe('the form of a ruling', () => {
  const form = (fields: Record<string, string>) => {
    const data = new FormData()
    for (const [name, value] of Object.entries(fields)) data.set(name, value)
    return data
  }

  it('reads outcome and grade from one choice', () => {
    const read = parseRulingForm(form({ choice: 'confirmed-C', reason: ' why ', lastRuling: '7' }))
    expect(read).toEqual({ outcome: 'confirmed', grade: 'C', reason: 'why', lastRulingSeen: 7 })
    expect(parseRulingForm(form({ choice: 'open', reason: 'why', lastRuling: '' }))).toMatchObject({
      outcome: 'open',
      lastRulingSeen: null,
    })
  })

  it('names a missing choice and an empty reason at once', () => {
    const refused = () => parseRulingForm(form({ reason: ' ', lastRuling: '' }))
    expect(refused).toThrow(/Choose what to rule/)
    expect(refused).toThrow(/Give a reason/)
  })
})
