import type { ReleaseRow } from '@/db/queries/releases'
import { fromJson } from '@/db/schema/values'
import type { RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import { ruleInWords } from '@/lib/work/catalogue/rule-in-words'
import { GRADE_CLASS_RULE, GRADE_MEANINGS } from '@/lib/work/catalogue/grade-class'
import { cautionsOf } from './cautions'
import { licenceInWords } from './licences'
import { RELEASE_FILES } from './release-files'

/** `README.txt`. */
export function readmeText(
  release: ReleaseRow,
  rule: RuleInForce,
  more: { changes: string; corrected: number | null; stampsSha256: string; address: string },
): string {
  const cosmology = fromJson(release.cosmology)
  const opening =
    release.kind === 'release'
      ? []
      : [
          release.kind === 'erratum'
            ? `THIS IS AN ERRATUM. It replaces release ${more.corrected}. What was wrong:`
            : `THIS IS A RETRACTION. Release ${more.corrected} is withdrawn and should not be used. Why:`,
          '',
          release.statement ?? '',
          '',
        ]
  const isRetraction = release.kind === 'retraction'
  const model = cosmology.model === 'flat LCDM' ? cosmology.model : `${cosmology.model} (flat LCDM)`
  const held = isRetraction
    ? ['A retraction holds no catalogue: its tables are empty.']
    : [
        `${release.entries} entries; ${release.candidates} judged candidates.`,
        more.changes,
        '',
        `Verdicts: ${ruleInWords(rule)}`,
        `Class of an entry: ${GRADE_CLASS_RULE}. ${GRADE_MEANINGS}`,
        `Cosmology of masses and delays in measurements.csv: ${model}, H0 = ${cosmology.hubbleConstant} km/s/Mpc, ` +
          `Omega_m = ${cosmology.omegaMatter}; a measurement that was made in another one says so.`,
        ...(release.recipe_hash ? [`Pictures were made by the recipe with the SHA-256 ${release.recipe_hash}.`] : []),
      ]
  return [
    release.title,
    `Release ${release.number} of the campaign "${release.campaign_name}", ${release.survey}`,
    `Frozen ${release.created_at}, made with ${release.software}`,
    more.address,
    '',
    ...opening,
    'PLEASE NOTE',
    ...cautionsOf(release).map((caution) => `* ${caution}`),
    '',
    release.description,
    '',
    ...held,
    '',
    'AUTHORS',
    release.authors,
    '',
    'HOW TO CITE',
    release.how_to_cite,
    '',
    'LICENCE',
    licenceInWords(release.licence),
    '',
    'FILES',
    ...RELEASE_FILES.map(({ name, about }) => `${name}\n    ${about}`),
    'SHA256SUMS\n    SHA-256 of each of these files; check with: sha256sum -c SHA256SUMS, beside them. RELEASE.zip holds it and so is not in it;\n    the page of the release has the SHA-256 of RELEASE.zip',
    `stamps.zip, beside this archive\n    the pictures of the entries, by designation. SHA-256 ${more.stampsSha256}`,
    '',
    'Text is exact in every format, also where it begins with =, +, - or @: do not open the files in a spreadsheet that runs formulas.',
    'People stand under pseudonyms, which are the same in every release of this campaign. Calibration stamps, which measure graders, are',
    'in no file; of them graders.csv has how often each grader gave which grade.',
    '',
    ...(isRetraction
      ? []
      : [
          'EVERY VERDICT CAN BE RECOMPUTED from grades.csv, graders.csv and rule.json: in a copy of Ringside',
          '    npm run reproduce -- RELEASE.zip',
          '',
        ]),
  ].join('\n')
}
