import { afterEach, beforeEach, expect, it } from 'vitest'
import { insertRecipe } from '@/db/queries/campaigns'
import { canonicalRecipe, defaultRecipe, type Recipe } from '@/lib/science/imaging/recipe'
import { cutoutFits } from '@/tests/_support/cutouts'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'
import { picturesOf } from './candidate-pictures'
import { takeRecipeAgain } from './change-recipe'
import { imageCandidates } from './image-candidates'
import { raiseRecipes } from './raise-recipes'

const EARLIER: Recipe = { ...defaultRecipe(['g', 'r', 'i']), version: 1, views: ['colour', 'deep'], northUp: true }

let intake: IntakeScenario
beforeEach(async () => {
  intake = await makeIntake()
  await insertRecipe(intake.db, {
    campaignId: intake.campaign.id,
    version: 3,
    parameters: canonicalRecipe(EARLIER),
    hash: 'of an earlier server',
    createdBy: intake.lead.id,
    now: intake.campaign.created_at,
  })
  for (const band of ['g', 'r', 'i']) await intake.deliver(`SWS1_${band}.fits`, cutoutFits({ seed: 7 }))
  await intake.read()
})
afterEach(() => intake.remove())

const recipes = async () => {
  const rows = await intake.db.selectFrom('recipe').selectAll().where('campaign_id', '=', intake.campaign.id).execute()
  return rows.map(({ version, parameters }) => ({ version, recipe: JSON.parse(parameters) as Recipe }))
}
const jobs = () => intake.db.selectFrom('job').select('unique_key').where('kind', '=', 'image-candidates').execute()
const pictures = async () => {
  const { id } = await intake.db.selectFrom('candidate').select('id').executeTakeFirstOrThrow()
  return (await picturesOf(intake.db, intake.campaign, [id])).get(id)
}

it('a recipe of an earlier drawing is followed by one of today’s that differs in nothing else, and pictures by it are asked for', async () => {
  expect(await raiseRecipes(intake.db)).toBe(1)
  expect((await recipes()).at(-1)).toEqual({ version: 4, recipe: { ...EARLIER, version: 2 } })
  expect(await jobs()).toEqual([{ unique_key: `image-candidates:${intake.campaign.id}:all` }])
  expect(await pictures()).toMatchObject({ recipe: 3 })
  await imageCandidates(intake.tools, { campaignId: intake.campaign.id }, async () => {})
  expect(await pictures()).toMatchObject({ recipe: 4 })
  const event = await intake.db.selectFrom('audit_event').selectAll().orderBy('id', 'desc').executeTakeFirstOrThrow()
  expect(event).toMatchObject({ person_id: null, action: 'stamps.recipe-raised', subject: '4' })
})

it('a start that finds nothing of an earlier drawing in force writes nothing', async () => {
  await raiseRecipes(intake.db)
  const before = await recipes()
  expect(await raiseRecipes(intake.db)).toBe(0)
  expect(await recipes()).toEqual(before)
})

it('an earlier version taken again is drawn as pictures are drawn now', async () => {
  await raiseRecipes(intake.db)
  await takeRecipeAgain(intake.db, intake.leadPermit, { again: 2, after: 4 })
  const earlier = (await recipes()).find(({ version }) => version === 3)
  expect(earlier?.recipe.version).toBe(1)
  await expect(takeRecipeAgain(intake.db, intake.leadPermit, { again: 2, after: 5 })).rejects.toMatchObject({
    status: 409,
  })
  expect((await recipes()).at(-1)).toMatchObject({
    version: 5,
    recipe: { version: 2, views: ['colour', 'deep', 'band:g', 'band:r', 'band:i'] },
  })
})
