import type { FormAction } from '@/components/people/use-kept-form'
import type { RuleVersion } from '@/lib/work/campaigns/change-settings'
import { ButtonLink } from '@/components/ui/button'
import { CosmologyForm, type CosmologyChoice } from './cosmology-form'
import { FormSection } from './form-section'
import { counted } from './in-words'
import { LookingForm, type Looking } from './looking-form'
import { PageHead } from './page-head'
import { RuleHistory } from './rule-history'
import { NamePatternForm, RuleForm } from './settings-forms'
import { SheetForm, type SheetChoice } from './sheet-form'

/** What a lead may change later, and what stays as it was made. */
export function SettingsView({
  campaign,
  picturesHref,
  whatIfHref,
  looking,
  calibrationHref,
  changeLooking,
  sheet,
  changeSheet,
  cosmology,
  changeCosmology,
  versions,
  changeRule,
  changeNamePattern,
}: {
  campaign: { name: string; survey: string; acronym: string; bands: string[]; namePattern: string | null }
  picturesHref: string
  whatIfHref: string
  looking: Looking
  calibrationHref: string
  changeLooking: FormAction
  sheet: SheetChoice
  changeSheet: FormAction
  cosmology: CosmologyChoice
  changeCosmology: FormAction
  versions: RuleVersion[]
  changeRule: FormAction
  changeNamePattern: FormAction
}) {
  const facts = [
    ['Survey', campaign.survey],
    ['Acronym', campaign.acronym],
    ['Bands, shortest wavelength first', campaign.bands.join(', ')],
  ]
  return (
    <div className="mx-auto flex max-w-6xl flex-col gap-8 px-5 py-8 md:px-10">
      <PageHead
        title={`Version ${versions[0].version} of the rule is in force`}
        lead="A change is added as a new version. Earlier ones stay, and every verdict names the version it was made by."
      />
      <FormSection
        title="The rule"
        about={
          <>
            <p>
              Saving starts a consensus run: it goes through all grades already given and may move candidates between
              open, split, confirmed and set aside. Rulings stand above it and grades are never touched.
            </p>
            <p className="mt-2">
              With more looks wanted, candidates come back to the bench of people who have not seen them.
            </p>
          </>
        }
      >
        <RuleForm rule={versions[0]} action={changeRule} />
        <ButtonLink href={whatIfHref} className="self-start">
          Try other thresholds before saving any
        </ButtonLink>
      </FormSection>
      <FormSection title="Its history" about={`${counted(versions.length, 'version')}, newest first.`}>
        <RuleHistory versions={versions} />
      </FormSection>
      <div id="looking" className="scroll-mt-6">
        <FormSection
          title="How people look"
          about="What comes next at the bench, and what is mixed in to learn how reliable each pair of eyes is. Nobody can tell a calibration stamp from a candidate before grading it."
        >
          <LookingForm looking={looking} action={changeLooking} />
          <ButtonLink href={calibrationHref} className="self-start">
            Make calibration stamps
          </ButtonLink>
        </FormSection>
      </div>
      <FormSection
        title="First pass"
        about="For searches of more than a few thousand: one or two people go over sheets of small stamps before the full team looks. What anyone of them sends on comes to the bench."
      >
        <SheetForm choice={sheet} action={changeSheet} />
      </FormSection>
      <FormSection
        title="Pictures"
        about="The recipe that makes pictures of cutouts: views and their order, brightness, weights of the bands, close field, north up."
      >
        <ButtonLink href={picturesHref} className="self-start">
          Change how pictures are made
        </ButtonLink>
      </FormSection>
      <FormSection
        title="Cosmology"
        about="In which measured Einstein radii become masses and time delays. A measurement keeps the one it was worked out in; a change holds for those that follow."
      >
        <CosmologyForm choice={cosmology} action={changeCosmology} />
      </FormSection>
      <FormSection
        title="File names"
        about="How candidate and band are read from file names. A change has files tried again that could not be matched; files already matched stay so."
      >
        <NamePatternForm value={campaign.namePattern} action={changeNamePattern} />
      </FormSection>
      <FormSection
        title="Fixed"
        about="Pictures and designations are made from these, so they stay as the campaign began."
      >
        <dl className="grid gap-x-8 gap-y-3 sm:grid-cols-3">
          {facts.map(([term, value]) => (
            <div key={term}>
              <dt className="text-note text-mute">{term}</dt>
              <dd>{value}</dd>
            </div>
          ))}
        </dl>
      </FormSection>
    </div>
  )
}
