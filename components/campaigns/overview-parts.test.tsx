import { renderToStaticMarkup } from 'react-dom/server'
import { expect, it } from 'vitest'
import type { CampaignOverview } from '@/lib/work/campaigns/campaign-overview'
import { GradingProgress } from './overview-parts'

const overviewBy = (
  rule: Partial<CampaignOverview['rule']>,
  grading: CampaignOverview['grading'],
  more: Partial<CampaignOverview> = {},
) =>
  ({
    candidates: 72,
    imaged: 72,
    rule: { gradesWanted: 6, leastGrades: 3, ...rule },
    grading,
    ...more,
  }) as CampaignOverview

const read = (overview: CampaignOverview, usesSheet?: boolean): string =>
  renderToStaticMarkup(<GradingProgress overview={overview} usesSheet={usesSheet} />)
    .replace(/<[^>]+>/g, ' ')
    .replace(/\s+/g, ' ')
    .replace(/ ([.,;])/g, '$1')
    .trim()

it('tells which share of a fixed number of looks is given, and why some are not wanted', () => {
  const overview = overviewBy({ method: 'mean' }, { given: 208, wanted: 420, waiting: 40 })
  expect(read(overview)).toBe(
    '50 % of the looks are given 208 of 420 wanted: 6 people for each of 72 imaged candidates, none at what a ruling has decided.',
  )
  expect(read(overview, true)).toContain('a ruling has decided or the first pass has not sent on.')
  expect(read({ ...overview, candidates: 74, grading: { given: 1, wanted: 432, waiting: 72 } })).toMatch(
    /72 imaged candidates\. 2 candidates without pictures yet\.$/,
  )
})

it('has a sentence for one candidate too', () => {
  const one = overviewBy({ method: 'mean' }, { given: 1, wanted: 6, waiting: 1 }, { candidates: 1, imaged: 1 })
  expect(read(one)).toBe('17 % of the looks are given 1 of 6 wanted: 6 people for the one imaged candidate.')
})

it('tells how many candidates want more looks where grades decide how many there are', () => {
  const grading = { given: 208, wanted: 232, waiting: 7 }
  expect(read(overviewBy({ method: 'reliability' }, grading))).toBe(
    '7 candidates want more looks 208 looks given, at most 24 more to come. A candidate is looked at until its grades decide it, by at most 6 people.',
  )
  expect(read(overviewBy({ method: 'reliability' }, { given: 208, wanted: 208, waiting: 0 }))).toBe(
    'No candidate wants another look 208 looks given. A candidate is looked at until its grades decide it, by at most 6 people.',
  )
})

it('tells a grader then how many were given, and draws no bar', () => {
  const overview = overviewBy({ method: 'reliability' }, { given: 208, wanted: null, waiting: null })
  expect(read(overview)).toBe(
    '208 looks given A candidate is looked at until its grades decide it, by at most 6 people.',
  )
  expect(renderToStaticMarkup(<GradingProgress overview={overview} />)).not.toContain('progressbar')
})
