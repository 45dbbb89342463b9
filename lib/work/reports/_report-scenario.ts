/** For tests of reports: candidates with grades that the rooms above would have written. */
import type { GradeLetter } from '@/db/schema/grading'
import { readPanel } from '@/lib/science/agreement/_fixtures'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { giveGrade } from '@/lib/work/consensus/_give-grade'
import { newestReportInput } from '@/db/queries/reports'
import { computeReport, type ComputedReport } from './compute-report'

export const NOW = Date.parse('2026-03-01T12:00:00.000Z')

/** Letters by grader in their order, '.' for none; each candidate with its truth, where it is a calibration stamp. */
export async function reportScenario(
  letters: readonly (string | { letters: string; truth: 'lens' | 'not a lens' })[],
  graders = 4,
): Promise<Scenario & { ids: number[] }> {
  const scenario = await makeScenario({}, graders)
  const { db, campaign } = scenario
  const ids: number[] = []
  for (const [index, entry] of letters.entries()) {
    const { letters: given, truth } = typeof entry === 'string' ? { letters: entry, truth: null } : entry
    const id = await addImagedCandidate(db, campaign, `c${index}`)
    if (truth) await db.updateTable('candidate').set({ truth }).where('id', '=', id).execute()
    for (const [grader, letter] of [...given].entries()) {
      if (letter !== '.') await giveGrade(db, campaign, id, scenario.graders[grader], letter as GradeLetter)
    }
    ids.push(id)
  }
  return { ...scenario, ids }
}

/** The panel of fixtures/agreement as a campaign: its grade 0 to 3 as A to N. */
export async function panelScenario(): Promise<Scenario & { ids: number[] }> {
  const { ratings, raters } = readPanel()
  const letters = ratings.map((row) => row.map((grade) => (grade === null ? '.' : 'ABCN'[grade])).join(''))
  return reportScenario(letters, raters.length)
}

export async function computedReport({ db, campaign }: Scenario, now = NOW): Promise<ComputedReport> {
  return computeReport(db, campaign.id, await newestReportInput(db, campaign.id), now)
}
