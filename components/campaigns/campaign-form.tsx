'use client'

import { useState } from 'react'
import { FormNote } from '@/components/people/form-note'
import { useKeptForm, type FormAction } from '@/components/people/use-kept-form'
import { Button, ButtonLink } from '@/components/ui/button'
import { TextField } from '@/components/ui/field'
import { DEFAULT_MEAN_RULE } from '@/lib/science/agreement/mean-rule'
import { bandsOutOfOrder } from './band-order'
import { FormSection } from './form-section'
import { NamePatternField } from './name-pattern-field'
import { RuleFields } from './rule-fields'

/** Everything a campaign starts with. Only name, survey, acronym and bands have no default. */
export function CampaignForm({ action }: { action: FormAction }) {
  const { state, pending, formProps } = useKeptForm(action)
  const [bands, setBands] = useState('')
  const swapped = bandsOutOfOrder(bands.split(/[\s,;]+/).filter(Boolean))
  const { errors } = state
  return (
    <form {...formProps} className="flex flex-col gap-8" aria-label="New campaign">
      <FormSection title="What is searched" about="These stand on every page and in every file of the campaign.">
        <TextField
          label="Name of the campaign"
          name="name"
          placeholder="First light, north field"
          autoComplete="off"
          error={errors?.name}
          required
        />
        <TextField
          label="Survey"
          name="survey"
          placeholder="Saltmarsh Wide Survey"
          autoComplete="off"
          error={errors?.survey}
          required
        />
        <TextField
          label="Acronym"
          name="acronym"
          placeholder="SWS"
          className="figures max-w-48"
          autoComplete="off"
          spellCheck={false}
          hint="3 to 16 letters and digits that begin every designation, as in SWS J001234.56-012345.6. Before designations are published the acronym must be registered with the IAU through the CDS, so that no two surveys use the same one."
          error={errors?.acronym}
          required
        />
      </FormSection>
      <FormSection
        title="Bands"
        about="In order of wavelength, shortest first: the last is red in the colour picture, the first is blue."
      >
        <TextField
          label="Bands"
          name="bands"
          placeholder="g r i"
          className="figures"
          autoComplete="off"
          autoCapitalize="none"
          spellCheck={false}
          value={bands}
          onChange={(event) => setBands(event.target.value)}
          hint="As the files call them, apart by blanks or commas."
          error={errors?.bands}
          required
        />
        {swapped ? (
          <p role="status" className="text-small text-text">
            Usually {swapped[1]} is bluer than {swapped[0]}. Is this the order of wavelength?
          </p>
        ) : null}
      </FormSection>
      <FormSection
        title="The rule"
        about="How the grades of a candidate decide it. You can change it later: every version is kept, and a lead’s ruling always stands above it."
      >
        <RuleFields rule={{ method: 'mean', ...DEFAULT_MEAN_RULE }} errors={errors} />
      </FormSection>
      <details className="group border-t border-line pt-6" open={errors?.namePattern ? true : undefined}>
        <summary className="min-h-6 w-fit text-body font-semibold">More: how files are named</summary>
        <div className="mt-4 max-w-2xl lg:ml-[18.5rem]">
          <NamePatternField error={errors?.namePattern} />
        </div>
      </details>
      <div className="flex flex-col gap-4 border-t border-line pt-6">
        <FormNote state={state} />
        <div className="flex gap-3">
          <Button tone="lamp" type="submit" disabled={pending} className="px-6">
            {pending ? 'Creating…' : 'Create the campaign'}
          </Button>
          <ButtonLink href="/" tone="bare">
            Leave it
          </ButtonLink>
        </div>
      </div>
    </form>
  )
}
