import { render, screen } from '@testing-library/react'
import { expect, it } from 'vitest'
import type { CampaignOverview } from '@/lib/work/campaigns/campaign-overview'
import { GraderOverview } from './overview-view'

const show = (mine: NonNullable<CampaignOverview['mine']>) => {
  const rule = { method: 'mean', gradesWanted: 3 } as CampaignOverview['rule']
  const grading = { given: 3, wanted: 3, waiting: 0 }
  const overview = { rule, candidates: 1, imaged: 1, grading, mine, outcome: null, upkeep: null }
  render(<GraderOverview overview={overview} about="" campaignPath="/campaigns/north" stamps={[]} />)
}
const bench = () => screen.queryByRole('link', { name: 'Sit down at the bench' })

it('leads a grader to the looks that are asked of them although nothing else is left', () => {
  show({ left: 0, lookedAt: 1, asked: 1 })
  expect(screen.getByRole('heading', { level: 1 })).toHaveTextContent('1 look is asked of you')
  expect(bench()).toHaveAttribute('href', '/campaigns/north/bench')
  expect(screen.queryByText(/Nothing is left/)).toBeNull()
})

it('tells of asked looks beside what is left, and that they come first', () => {
  show({ left: 5, lookedAt: 1, asked: 2 })
  expect(screen.getByText('2 looks are asked of you; they come first.')).toBeVisible()
})

it('says that nothing is left where nothing is', () => {
  show({ left: 0, lookedAt: 1, asked: 0 })
  expect(screen.getByRole('heading', { level: 1 })).toHaveTextContent('Nothing is left for you')
  expect(bench()).toBeNull()
})
