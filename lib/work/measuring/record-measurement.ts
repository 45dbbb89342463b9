import 'server-only'
import type { Insertable, Kysely } from 'kysely'
import { findCandidate } from '@/db/queries/candidates'
import { findMeasurementByUid, insertMeasurement, listStandingOf } from '@/db/queries/measuring'
import type { DB } from '@/db/schema'
import type { MeasurementKind, MeasurementTable } from '@/db/schema/measuring'
import { toJson } from '@/db/schema/values'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { conflict, invalid, notFound } from '@/lib/platform/problems/problem'
import { cosmologyOf } from '@/lib/work/campaigns/cosmology-of'
import { revealedTo } from '@/lib/work/grading/may-reveal'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { picturesOf } from '@/lib/work/stamps/candidate-pictures'
import { fitShape, massOf, measuringRefusal, type MeasuringContext } from './fitted'
import type { MeasurementInput } from './measurement-input'
import { usedRedshift, type UsedRedshift } from './redshift-choice'

/** A circle or an ellipse takes the place of either; a model of a model. */
const sameSort = (a: MeasurementKind, b: MeasurementKind) => (a === 'model') === (b === 'model')

/**
 * Keeps a measurement of a candidate. It replaces the person's own earlier one of its sort, which stays as a row. Leads and graders
 * measure, graders what they have judged. All numbers are worked out here from the points; sending the same again changes nothing.
 * @throws Problem 404 no such candidate here; 409 `grade-first`, `scale-changed`, `uid-taken`; 422 with the sentence of the fit.
 */
export async function recordMeasurement(
  db: Kysely<DB>,
  permit: CampaignPermit<'grade'>,
  candidateId: number,
  input: MeasurementInput,
): Promise<{ id: number; replaced: number | null }> {
  const { campaign, viewer } = permit
  const candidate = await findCandidate(db, campaign.id, candidateId)
  if (!candidate) throw notFound('candidate')
  await requireJudged(db, permit, candidateId)
  const recipeVersion = await recipeOfView(db, permit, candidateId, input)
  const context: MeasuringContext = {
    pixelScaleArcsec: input.pixelScaleArcsec,
    cosmology: cosmologyOf(campaign),
    lens: usedRedshift(input.redshifts.lens, candidate.lens_redshift),
    source: usedRedshift(input.redshifts.source, candidate.source_redshift),
  }
  const { fitted, radiusArcsec, errorArcsec, mass } = workOut(input, context)
  return db.transaction().execute(async (transaction) => {
    const same = await findMeasurementByUid(transaction, input.uid)
    if (same) {
      if (same.person_id === viewer.id && same.candidate_id === candidateId)
        return { id: same.id, replaced: same.replaces }
      throw conflict('uid-taken', 'Another measurement has this id. Measure again, so that it gets one of its own.')
    }
    await requireJudged(transaction, permit, candidateId)
    const standing = await listStandingOf(transaction, candidateId, viewer.id)
    const replaced = standing.find(({ kind }) => sameSort(kind, input.shape.kind))?.id ?? null
    const { id } = await insertMeasurement(transaction, {
      uid: input.uid,
      campaign_id: campaign.id,
      candidate_id: candidateId,
      person_id: viewer.id,
      event: 'measured',
      kind: input.shape.kind,
      view: input.view,
      recipe_version: recipeVersion,
      pixel_scale_arcsec: input.pixelScaleArcsec,
      points: toJson(input.points),
      fitted: toJson<unknown>(fitted),
      einstein_radius_arcsec: radiusArcsec,
      error_arcsec: errorArcsec,
      ...redshiftColumns('lens', context.lens),
      ...redshiftColumns('source', context.source),
      cosmology: toJson<unknown>(context.cosmology),
      mass: mass ? toJson<unknown>(mass) : null,
      remark: input.remark,
      replaces: replaced,
      at: isoTime(),
    })
    await recordEvent(transaction, {
      personId: viewer.id,
      campaignId: campaign.id,
      action: 'measuring.measured',
      subject: candidate.name,
      detail: { measurement: id, kind: input.shape.kind, replaced },
    })
    return { id, replaced }
  })
}

export async function requireJudged(
  db: Kysely<DB>,
  permit: CampaignPermit<'grade'>,
  candidateId: number,
): Promise<void> {
  if ((await revealedTo(db, permit, [candidateId])).has(candidateId)) return
  throw conflict(
    'grade-first',
    'Measuring opens once you have graded this candidate yourself, so that nobody’s measurement sways your grade.',
  )
}

/** The version of the recipe of the view's picture. The scale that the person measured by must be the one it has now. */
async function recipeOfView(
  db: Kysely<DB>,
  permit: CampaignPermit<'grade'>,
  candidateId: number,
  input: MeasurementInput,
): Promise<number | null> {
  const pictures = (await picturesOf(db, permit.campaign, [candidateId])).get(candidateId)
  const view = pictures?.views.find(({ key, url }) => key === input.view && url !== null)
  if (!view) {
    throw conflict(
      'scale-changed',
      'The picture that this was measured on is not there any more: load the page again and look whether the points still lie right.',
    )
  }
  const scale = view.geometry.pixelScaleArcsec
  if (scale === null || Math.abs(input.pixelScaleArcsec / scale - 1) > 1e-6) {
    throw conflict(
      'scale-changed',
      `The pixel scale of this view is ${scale === null ? 'not known' : `${scale}″`} now and was ${input.pixelScaleArcsec}″ when this was measured: load the page again and measure anew.`,
    )
  }
  return pictures?.recipe ?? null
}

function workOut(input: MeasurementInput, context: MeasuringContext) {
  try {
    const found = fitShape(input.shape, input.points, context)
    return { ...found, mass: areImpossible(context) ? null : massOf(found, context) }
  } catch (error) {
    const sentence = measuringRefusal(error)
    if (sentence === null) throw error
    throw invalid(sentence)
  }
}

/** Redshifts that came with the candidate and cannot be are nobody's mistake here: the radius is kept, without a mass. */
const areImpossible = ({ lens, source }: MeasuringContext): boolean =>
  lens?.basis === 'given' && source?.basis === 'given' && source.value <= lens.value

function redshiftColumns<Of extends 'lens' | 'source'>(of: Of, used: UsedRedshift | null) {
  return {
    [`${of}_redshift`]: used?.value ?? null,
    [`${of}_redshift_error`]: used?.error ?? null,
    [`${of}_redshift_low`]: used?.low ?? null,
    [`${of}_redshift_high`]: used?.high ?? null,
    [`${of}_redshift_basis`]: used?.basis ?? null,
  } as Pick<
    Insertable<MeasurementTable>,
    `${Of}_redshift` | `${Of}_redshift_error` | `${Of}_redshift_low` | `${Of}_redshift_high` | `${Of}_redshift_basis`
  >
}
