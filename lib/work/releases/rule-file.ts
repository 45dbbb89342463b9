import { GRADE_POINTS } from '@/lib/science/agreement/grades'
import { LENS_PSEUDO_COUNTS, LENS_START } from '@/lib/science/agreement/lens-model'
import type { ReleaseCosmology, ReleaseKind } from '@/db/schema/releases'
import type { RunModel } from '@/db/schema/consensus'
import type { RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import { z } from 'zod'

/** `rule.json`: everything beside the grades that the verdicts follow from. */
export function ruleFile(release: {
  kind: ReleaseKind
  number: number
  campaign: string
  rule: RuleInForce
  cosmology: ReleaseCosmology
  recipeHash: string | null
  software: string
  frozenAt: string
  candidates: number
  entries: number
  model: RunModel | null
  cautions: readonly string[]
}): string {
  const { rule, model } = release
  const { id: _id, ...parameters } = rule
  return (
    JSON.stringify(
      {
        format: 'ringside-release-rule 1',
        cautions: release.cautions,
        campaign: release.campaign,
        release: release.number,
        kind: release.kind,
        frozenAt: release.frozenAt,
        candidates: release.candidates,
        entries: release.entries,
        software: release.software,
        rule: parameters,
        gradePoints: GRADE_POINTS,
        reliability:
          rule.method === 'reliability' && model
            ? {
                method:
                  'Dawid & Skene (1979), two classes under four grades, started from the vote shares and iterated until no ' +
                  'probability moves by 1e-6; decided by the sequential test of Wald (1945).',
                startOfGrade: LENS_START,
                pseudoCounts: LENS_PSEUDO_COUNTS,
                lensShare: model.lensShare,
                iterations: model.iterations,
                converged: model.converged,
              }
            : null,
        cosmology: release.cosmology,
        recipeSha256: release.recipeHash,
      },
      null,
      2,
    ) + '\n'
  )
}

const shared = {
  version: z.number(),
  gradesWanted: z.number(),
  leastGrades: z.number(),
}

/** What is read of it to recompute the verdicts. */
export const RuleFile = z.object({
  format: z.literal('ringside-release-rule 1'),
  release: z.number(),
  campaign: z.string(),
  kind: z.enum(['release', 'erratum', 'retraction']),
  candidates: z.int().nonnegative(),
  entries: z.int().nonnegative(),
  rule: z.discriminatedUnion('method', [
    z.object({
      method: z.literal('mean'),
      ...shared,
      confirmMean: z.number(),
      setAsideMean: z.number(),
      splitSpread: z.number(),
    }),
    z.object({
      method: z.literal('reliability'),
      ...shared,
      mostLooks: z.number(),
      falseConfirmed: z.number(),
      missedLens: z.number(),
    }),
  ]),
})
