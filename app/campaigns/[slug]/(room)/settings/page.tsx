import type { Metadata } from 'next'
import { permitPage } from '@/app/_lib/page-permit'
import { SettingsView } from '@/components/campaigns/settings-view'
import { fromJson } from '@/db/schema/values'
import { listRuleVersions } from '@/lib/work/campaigns/change-settings'
import { sheetSettings } from '@/lib/work/sheet/change-sheet'
import {
  changeCosmologyAction,
  changeLookingAction,
  changeSheetAction,
  changeNamePatternAction,
  changeRuleAction,
} from './actions'

export const metadata: Metadata = { title: 'Settings' }

export default async function SettingsPage({ params }: PageProps<'/campaigns/[slug]/settings'>) {
  const { slug } = await params
  const { db, permit } = await permitPage(slug, 'lead', '/settings')
  const { campaign } = permit
  return (
    <SettingsView
      campaign={{ ...campaign, bands: fromJson(campaign.bands), namePattern: campaign.name_pattern }}
      picturesHref={`/campaigns/${slug}/settings/pictures`}
      whatIfHref={`/campaigns/${slug}/what-if`}
      versions={await listRuleVersions(db, permit)}
      looking={{
        queueOrder: campaign.queue_order,
        calibrationShare: campaign.calibration_share,
        repeatShare: campaign.repeat_share,
        practiceWanted: campaign.practice_wanted,
      }}
      calibrationHref={`/campaigns/${slug}/calibration`}
      changeLooking={changeLookingAction.bind(null, slug)}
      sheet={await sheetSettings(db, permit)}
      changeSheet={changeSheetAction.bind(null, slug)}
      cosmology={{
        cosmology: campaign.cosmology,
        hubbleConstant: campaign.hubble_constant,
        omegaMatter: campaign.omega_matter,
      }}
      changeCosmology={changeCosmologyAction.bind(null, slug)}
      changeRule={changeRuleAction.bind(null, slug)}
      changeNamePattern={changeNamePatternAction.bind(null, slug)}
    />
  )
}
