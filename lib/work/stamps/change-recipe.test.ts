import { createHash } from 'node:crypto'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { Problem } from '@/lib/platform/problems/problem'
import { canonicalRecipe, defaultRecipe, type Recipe } from '@/lib/science/imaging/recipe'
import { lendNext } from '@/lib/work/queue/lend-next'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { cutoutFits } from '@/tests/_support/cutouts'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'
import { picturesOf } from './candidate-pictures'
import { changeRecipe, takeRecipeAgain } from './change-recipe'
import { imageCandidates } from './image-candidates'
import { listRecipeVersions, recipeProgress } from './recipe-versions'

let intake: IntakeScenario
let first: number
let second: number
beforeEach(async () => {
  intake = await makeIntake()
  for (const name of ['SWS1', 'SWS2']) await intake.deliver(`${name}_g.fits`, cutoutFits({ seed: name.length }))
  await intake.deliver('SWS2_r.fits', cutoutFits({ seed: 7 }))
  await intake.read()
  const rows = await intake.db.selectFrom('candidate').select('id').orderBy('name').execute()
  ;[first, second] = rows.map(({ id }) => id)
})
afterEach(() => intake.remove())

/** The scenario stands at version 2. */
const OTHER: Recipe = { ...defaultRecipe(['g', 'r', 'i']), views: ['band:g', 'deep'], closeFieldArcsec: 8 }
const change = (recipe: Recipe, after: number) => changeRecipe(intake.db, intake.leadPermit, { recipe, after })
const image = () => imageCandidates(intake.tools, { campaignId: intake.campaign.id }, async () => {})
const pictures = async (id: number) => {
  const found = (await picturesOf(intake.db, intake.campaign, [id])).get(id)
  if (!found) throw new Error('no pictures')
  return found
}
const recipes = () => intake.db.selectFrom('recipe').selectAll().where('campaign_id', '=', intake.campaign.id).execute()
const jobs = () => intake.db.selectFrom('job').select('unique_key').where('kind', '=', 'image-candidates').execute()
const grade = async (body: object, id = first) => {
  const permit = await intake.permit(intake.graders[0], 'grade')
  return recordGrade(intake.db, permit, id, GradeInput.parse({ grade: 'B', ...body }))
}
const gradedOn = async () =>
  (
    await intake.db
      .selectFrom('grade')
      .innerJoin('recipe', 'recipe.id', 'grade.recipe_id')
      .select('recipe.version')
      .orderBy('grade.id')
      .execute()
  ).map(({ version }) => version)

async function refusal(call: Promise<unknown>): Promise<string> {
  const error = await call.catch((thrown: unknown) => thrown)
  if (!(error instanceof Problem)) throw new Error(`expected a Problem, got ${String(error)}`)
  return `${error.status} ${error.type}`
}

describe('a changed recipe', () => {
  it('is a new version with the SHA-256 of its canonical JSON, and asks for pictures by it', async () => {
    const answer = await change(OTHER, 2)
    const hash = createHash('sha256').update(canonicalRecipe(OTHER)).digest('hex')
    expect(answer).toEqual({ version: 3, hash })
    const [newest] = await listRecipeVersions(intake.db, intake.leadPermit)
    expect(newest).toMatchObject({ version: 3, hash, author: 'avocet', recipe: OTHER })
    expect(await jobs()).toEqual([{ unique_key: `image-candidates:${intake.campaign.id}:all` }])
    expect(await recipeProgress(intake.db, intake.leadPermit)).toEqual({
      version: 3,
      candidates: 2,
      imaged: 0,
      working: true,
    })
  })

  it('is refused when somebody was quicker, and when it changes nothing; nothing is written', async () => {
    const [inForce] = await listRecipeVersions(intake.db, intake.leadPermit)
    expect(await refusal(change(OTHER, 1))).toBe('409 recipe-outdated')
    expect(await refusal(change(inForce.recipe, 2))).toBe('409 recipe-unchanged')
    expect(await recipes()).toHaveLength(2)
    expect(await jobs()).toEqual([])
  })

  it('is for leads only', async () => {
    for (const viewer of [intake.graders[0], intake.reader, intake.stranger]) {
      await expect(intake.permit(viewer, 'lead')).rejects.toBeInstanceOf(Problem)
    }
  })

  it('leaves the old pictures in sight, whole and by their own recipe, until the new ones are there', async () => {
    const before = await pictures(first)
    await change(OTHER, 2)
    expect(await pictures(first)).toMatchObject({ views: before.views, recipe: 2, closeFieldArcsec: 12 })
    await image()
    const after = await pictures(first)
    expect(after).toMatchObject({ recipe: 3, closeFieldArcsec: 8 })
    expect(after.views.map(({ key }) => key)).toEqual(['band:g', 'deep'])
    expect(after.views.every(({ url }) => url !== null)).toBe(true)
    expect(await recipeProgress(intake.db, intake.leadPermit)).toMatchObject({ imaged: 2, candidates: 2 })
  })

  it('tells its progress by candidate', async () => {
    await change(OTHER, 2)
    const told: [number, number][] = []
    await imageCandidates(intake.tools, { campaignId: intake.campaign.id }, async (...step) => void told.push(step))
    expect(told).toEqual([
      [0, 2],
      [1, 2],
      [2, 2],
    ])
  })

  it('taken again is a new version with the hash of the old one', async () => {
    await change(OTHER, 2)
    const again = await takeRecipeAgain(intake.db, intake.leadPermit, { again: 1, after: 3 })
    const versions = await listRecipeVersions(intake.db, intake.leadPermit)
    expect(again).toEqual({ version: 4, hash: versions.at(-1)?.hash })
    expect(versions.map(({ version }) => version)).toEqual([4, 3, 2, 1])
    await image()
    expect(await pictures(first)).toMatchObject({ recipe: 4 })
  })

  it('cannot be taken again when it is in force, or of another campaign', async () => {
    const again = (version: number) =>
      refusal(takeRecipeAgain(intake.db, intake.leadPermit, { again: version, after: 2 }))
    expect(await again(2)).toBe('409 recipe-unchanged')
    expect(await again(3)).toBe('404 not-found')
    expect(await recipes()).toHaveLength(2)
  })
})

describe('a grade remembers the recipe of the pictures it was given on', () => {
  it('which the queue tells, although a newer one is in force and even drawn meanwhile', async () => {
    const lent = await lendNext(intake.db, await intake.permit(intake.graders[0], 'grade'), 5)
    expect(lent.candidates.map(({ recipe }) => recipe)).toEqual([2, 2])
    await change(OTHER, 2)
    await image()
    await grade({ recipe: lent.candidates[0].recipe })
    expect(await gradedOn()).toEqual([2])
  })

  it('or, when none is named, that of the newest pictures there are', async () => {
    await change(OTHER, 2)
    await grade({}, first)
    await image()
    await grade({}, second)
    expect(await gradedOn()).toEqual([2, 3])
  })

  it('and is refused with a version that the campaign does not have', async () => {
    expect(await refusal(grade({ recipe: 3 }))).toBe('422 invalid')
    expect(() => GradeInput.parse({ grade: 'B', recipe: 0 })).toThrow('Versions of a recipe count from 1.')
    expect(await gradedOn()).toEqual([])
  })
})
