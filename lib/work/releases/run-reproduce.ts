// npm run reproduce -- RELEASE.zip: recomputes every verdict of a release and says whether all agree.
import { NotARelease } from './read-release-zip'
import { reproduce, type Reproduction } from './reproduce'

const MOST_LISTED = 50

const COMPARED =
  'Compared: verdicts, states, numbers and places in candidates.csv and catalogue.csv, and the copies of the catalogue. Not compared, since no grade tells them: remarks, ' +
  'tags, known objects, measurements, redshifts.'

/** What is printed, and the exit code: 0 all agree, 1 some do not. */
export function inWords({ release, campaign, kind, verdicts, grades, differences }: Reproduction): string[] {
  const which = `Release ${release} of ${campaign}`
  if (kind === 'retraction') return [`${which} is a retraction: it has no verdicts, only the reason in README.txt.`]
  if (differences.length === 0) {
    return [`${which}: ${grades} grades. ${COMPARED}`, `All ${verdicts} verdicts agree.`]
  }
  const differing = new Set(differences.map(({ candidate }) => candidate)).size
  const listed = differences
    .slice(0, MOST_LISTED)
    .map(
      ({ candidate, what, released, recomputed }) =>
        `  ${candidate}: ${what} is released as ${released}, where ${recomputed} is expected`,
    )
  const more = differences.length - listed.length
  return [
    `${which}: ${grades} grades.`,
    `${differing} of ${verdicts} verdicts ${differing === 1 ? 'does' : 'do'} NOT agree:`,
    ...listed,
    ...(more > 0 ? [`  and ${more} more differences`] : []),
  ]
}

async function main(path: string | undefined): Promise<number> {
  if (!path) {
    console.error('Say which archive: npm run reproduce -- RELEASE.zip')
    return 2
  }
  try {
    const reproduction = await reproduce(path)
    console.log(inWords(reproduction).join('\n'))
    return reproduction.differences.length === 0 ? 0 : 1
  } catch (error) {
    if (!(error instanceof NotARelease)) throw error
    console.error(error.message)
    return 2
  }
}

if (process.argv[1]?.endsWith('run-reproduce.ts')) process.exitCode = await main(process.argv[2])
