'use client'

import Link from 'next/link'
import { useState } from 'react'
import { FormSection } from '@/components/campaigns/form-section'
import { FormNote } from '@/components/people/form-note'
import { useKeptForm } from '@/components/people/use-kept-form'
import { Button } from '@/components/ui/button'
import { Notice } from '@/components/ui/notice'
import { TextArea, TextField } from '@/components/ui/field'
import type { ReleaseKind } from '@/db/schema/releases'
import type { PublishScreenProps } from './publish-screen'
import { Choice, Tick } from './choices'

const KINDS: Record<ReleaseKind, { label: string; meaning: string }> = {
  release: { label: 'A release', meaning: 'The catalogue as it is now.' },
  erratum: {
    label: 'An erratum',
    meaning: 'The catalogue as it is now, in place of an older release, which then says what was wrong with it.',
  },
  retraction: {
    label: 'A retraction',
    meaning: 'No catalogue: it withdraws an older release, which then says why and should not be used.',
  },
}

/** What a release says of itself. Nothing that was typed is lost when something is refused. */
export function PublishForm({ home, campaign, survey, year, licences, preview, kind, of, action }: PublishScreenProps) {
  const { state, pending, formProps } = useKeptForm(action)
  const [wanted, setWanted] = useState<ReleaseKind>(preview.correctable.length > 0 ? kind : 'release')
  const { values = {}, errors = {} } = state
  const { last, number, cautions, confirmed, correctable } = preview
  const [licence, setLicence] = useState(
    last && !licences.some(({ id }) => id === last.licence) ? 'words' : (last?.licence ?? 'CC-BY-4.0'),
  )
  const title = last?.title ?? `Candidate strong gravitational lenses of ${campaign}`
  return (
    <form {...formProps} className="flex flex-col gap-8">
      {correctable.length > 0 ? (
        <FormSection title="What it is" about="Numbers go on whatever it is: this is the next one.">
          <fieldset className="flex flex-col gap-2">
            <legend className="sr-only">What it is</legend>
            {(Object.keys(KINDS) as ReleaseKind[]).map((one) => (
              <Choice
                key={one}
                name="kind"
                value={one}
                checked={wanted === one}
                onChange={() => setWanted(one)}
                {...KINDS[one]}
              />
            ))}
          </fieldset>
          {wanted === 'erratum' && preview.enteredCount + preview.leftCount === 0 ? (
            <Notice>
              No entry has come or gone since release {preview.before}. Its changes.csv will tell whether anything else
              is otherwise: see that what was wrong is put right before this is frozen.
            </Notice>
          ) : null}
          {wanted === 'retraction' ? (
            <Notice>A retraction holds none of the candidates counted above: only its reason and the metadata.</Notice>
          ) : null}
          {wanted === 'release' ? null : (
            <>
              <label className="flex flex-col gap-1 text-small font-semibold">
                {wanted === 'erratum' ? 'Release that it corrects' : 'Release that it withdraws'}
                <select
                  name="corrects"
                  defaultValue={values.corrects ?? of ?? correctable[0].number}
                  aria-invalid={errors.corrects ? true : undefined}
                  className="min-h-9 rounded-control border border-edge bg-well px-3 text-body font-normal"
                >
                  {correctable.map((one) => (
                    <option key={one.number} value={one.number}>
                      {one.number}: {one.title}
                    </option>
                  ))}
                </select>
                {errors.corrects ? <span className="text-note font-normal text-alarm">{errors.corrects}</span> : null}
              </label>
              <TextArea
                label={wanted === 'erratum' ? 'What was wrong with it' : 'Why it is withdrawn'}
                name="statement"
                rows={3}
                defaultValue={values.statement}
                error={errors.statement}
                hint="Stands on the page of that release for everybody who may read it, as soon as the files of this one are there."
              />
            </>
          )}
        </FormSection>
      ) : (
        <input type="hidden" name="kind" value="release" />
      )}
      <FormSection title="What it holds" about="In README, VOTable and the metadata for a deposit.">
        <TextField label="Title" name="title" defaultValue={values.title ?? title} error={errors.title} />
        <TextArea
          label="Description"
          name="description"
          rows={4}
          defaultValue={values.description ?? last?.description}
          error={errors.description}
          hint="How candidates were found, on which images, who looked, what is complete and what is not."
        />
      </FormSection>
      <FormSection
        title="Whose it is"
        about="People who grade stand under pseudonyms; authors are those whom you name here."
      >
        <TextArea
          label="Authors"
          name="authors"
          rows={4}
          defaultValue={values.authors ?? last?.authors}
          error={errors.authors}
          hint="One a line: ‘Family, Given’, or the whole name of a group."
        />
        <div className="grid gap-5 sm:grid-cols-[minmax(0,1fr)_8rem]">
          <TextField
            label="Publisher"
            name="publisher"
            defaultValue={values.publisher ?? last?.publisher ?? survey}
            error={errors.publisher}
          />
          <TextField
            label="Year"
            name="year"
            inputMode="numeric"
            defaultValue={values.year ?? year}
            error={errors.year}
          />
        </div>
        <TextArea
          label="How to cite"
          name="howToCite"
          rows={2}
          defaultValue={values.howToCite}
          error={errors.howToCite}
          hint="Left empty it is made of authors, year, title, number and publisher."
        />
      </FormSection>
      <FormSection title="Licence" about="What others may do with it.">
        <fieldset className="flex flex-col gap-2">
          <legend className="sr-only">Licence</legend>
          {licences.map(({ id, name }) => (
            <Choice
              key={id}
              name="licence"
              value={id}
              checked={licence === id}
              onChange={() => setLicence(id)}
              label={id}
              meaning={name}
            />
          ))}
          <Choice
            name="licence"
            value="words"
            checked={licence === 'words'}
            onChange={() => setLicence('words')}
            label="Another"
            meaning="In your own words."
          />
        </fieldset>
        {licence === 'words' ? (
          <TextArea
            label="Licence in words"
            name="licenceWords"
            rows={2}
            defaultValue={values.licenceWords ?? last?.licence}
            error={errors.licenceWords ?? errors.licence}
          />
        ) : null}
      </FormSection>
      <FormSection title="Before you publish" about="Both cautions travel in every file.">
        <ul className="flex list-disc flex-col gap-2 pl-5 text-body">
          <li>{cautions.visual}</li>
          <li>{cautions.acronym}</li>
        </ul>
        <Tick name="cautionsRead" label="I have read both." error={errors.cautionsRead} />
        {(confirmed === 0 || errors.emptyIsMeant) && wanted !== 'retraction' ? (
          <Tick
            name="emptyIsMeant"
            label="Nothing is confirmed, and a release without an entry is meant."
            error={errors.emptyIsMeant}
          />
        ) : null}
        <FormNote state={state} />
        <div className="flex flex-wrap items-center gap-4">
          <Button tone="lamp" type="submit" disabled={pending}>
            {pending ? 'Freezing…' : `Freeze release ${number}`}
          </Button>
          <Link href={`${home}/releases`} className="text-small text-mute underline underline-offset-4 hover:text-text">
            Leave it for now
          </Link>
        </div>
      </FormSection>
    </form>
  )
}
