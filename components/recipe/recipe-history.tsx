import { moment } from '@/components/campaigns/in-words'
import { CopyText } from '@/components/table/copy-text'
import { Button } from '@/components/ui/button'
import type { RecipeVersion } from '@/lib/work/stamps/recipe-versions'
import { changedParts } from './recipe-draft'

/** Every version of the recipe with its hash and what it changed. */
export function RecipeHistory({
  versions,
  bands,
  busy,
  onLook,
  onAgain,
}: {
  versions: RecipeVersion[]
  bands: string[]
  busy: boolean
  /** Puts a version into the editor, to look at it before it is taken. */
  onLook: (version: RecipeVersion) => void
  onAgain: (version: RecipeVersion) => void
}) {
  return (
    <div className="overflow-x-auto" tabIndex={0} role="region" aria-label="History of the recipe">
      <table className="w-full text-left text-small">
        <thead>
          <tr className="border-b border-line text-note text-mute">
            {['version', 'hash (SHA-256)', 'changed', 'by', ''].map((head) => (
              <th key={head} className="py-2 pr-4 font-normal">
                {head}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {versions.map((version, index) => {
            const older = versions[index + 1]
            // Such a version is made by the server at its start, in the name of whoever made the one before.
            const isRaised = older !== undefined && older.recipe.version !== version.recipe.version
            const changed = older ? changedParts(older.recipe, version.recipe, bands) : []
            return (
              <tr key={version.version} className="h-row border-b border-line">
                <td className="whitespace-nowrap pr-4">
                  <span className="figures">{version.version}</span>
                  {index === 0 ? <span className="text-mute"> in force</span> : null}
                </td>
                <td className="figures pr-4">
                  <CopyText text={version.hash} what={`hash of version ${version.version}`}>
                    {version.hash.slice(0, 12)}
                  </CopyText>
                </td>
                <td className="min-w-40 pr-4">{older ? changed.join(', ') || 'nothing that shows' : 'the first'}</td>
                <td className="whitespace-nowrap pr-4 text-mute">
                  {isRaised ? 'Ringside' : version.author}, {moment(version.createdAt)}
                </td>
                <td className="whitespace-nowrap py-1 text-right">
                  {index === 0 ? null : (
                    <span className="inline-flex gap-1">
                      <Button tone="bare" disabled={busy} onClick={() => onLook(version)}>
                        Look at it
                      </Button>
                      <Button disabled={busy} onClick={() => onAgain(version)}>
                        Take version {version.version} again
                      </Button>
                    </span>
                  )}
                </td>
              </tr>
            )
          })}
        </tbody>
      </table>
    </div>
  )
}
