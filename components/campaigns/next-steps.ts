import type { CampaignOverview } from '@/lib/work/campaigns/campaign-overview'
import { counted } from './in-words'

export interface Step {
  text: string
  href: string
  action: string
}

/** `2 looks are asked of you` */
export const asksInWords = (asked: number): string =>
  `${counted(asked, 'look')} ${asked === 1 ? 'is' : 'are'} asked of you`

/** What a lead can do next, the most useful first. */
export function leadSteps(overview: CampaignOverview, home: string): Step[] {
  const { outcome, upkeep, mine } = overview
  if (!outcome || !upkeep || !mine) return []
  const { counts } = outcome
  const steps: (Step | false)[] = [
    overview.candidates === 0 && {
      text: 'Upload the cutouts: FITS files, and a manifest if you have one.',
      href: `${home}/intake`,
      action: 'Upload files',
    },
    upkeep.graders < 2 &&
      upkeep.openInvitations === 0 && {
        text: 'Nobody but you grades here. Agreement needs several people.',
        href: `${home}/people`,
        action: 'Invite people',
      },
    mine.asked > 0 && {
      text: `${asksInWords(mine.asked)} at the bench.`,
      href: `${home}/bench`,
      action: 'To the bench',
    },
    counts.split > 0 && {
      text: `${counted(counts.split, 'split')} ${counts.split === 1 ? 'needs' : 'need'} a ruling.`,
      href: `${home}/splits`,
      action: counts.split === 1 ? 'Settle it' : 'Settle them',
    },
    upkeep.refusedFiles > 0 && {
      text: `${counted(upkeep.refusedFiles, 'file')} could not be used; each says why.`,
      href: `${home}/intake`,
      action: 'See the files',
    },
    mine.left > 0 && {
      text: `${counted(mine.left, 'candidate')} ${mine.left === 1 ? 'is' : 'are'} left for you to grade.`,
      href: `${home}/bench`,
      action: 'To the bench',
    },
    upkeep.openInvitations > 0 && {
      text: `${counted(upkeep.openInvitations, 'invitation')} without an answer.`,
      href: `${home}/people`,
      action: 'See people',
    },
    counts.confirmed > 0 && {
      text: `${counted(counts.confirmed, 'candidate')} in the catalogue, ready as CSV and VOTable.`,
      href: `${home}/catalogue`,
      action: 'Open the catalogue',
    },
  ]
  return steps.filter((step) => step !== false)
}
