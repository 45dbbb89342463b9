import { Button } from '@/components/ui/button'
import { ENTRY_CLASSES, type TableQuery } from '@/lib/work/releases/table-query'
import type { ReleaseLinks } from './release-links'
import { isNarrowed } from './table-parameters'

const field = 'min-h-9 w-full rounded-control border border-edge bg-well px-2.5 text-small text-text'
const label = 'flex min-w-0 flex-col gap-1 text-note text-mute'

/** A form that asks by GET, so that its answer has an address and needs no script. */
export function EntriesFilter({
  query,
  links,
  sortable,
}: {
  query: TableQuery
  links: ReleaseLinks
  sortable: boolean
}) {
  return (
    <form
      method="get"
      action="#entries"
      role="search"
      aria-label="Entries"
      className="flex flex-wrap items-end gap-x-4 gap-y-3"
    >
      {links.key === null ? null : <input type="hidden" name="key" value={links.key} />}
      {query.order === 'catalogue' ? null : (
        <input type="hidden" name="sort" value={query.descending ? `-${query.order}` : query.order} />
      )}
      {sortable ? (
        <>
          <label className={`${label} w-full sm:w-52`}>
            Name, label or tag
            <input type="search" name="q" defaultValue={query.text} maxLength={200} className={field} />
          </label>
          <fieldset className="flex flex-col gap-1">
            <legend className="float-left text-note text-mute">Class</legend>
            <span className="flex min-h-9 clear-left flex-wrap items-center gap-x-4">
              {ENTRY_CLASSES.map((one) => (
                <label key={one} className="flex min-h-6 items-center gap-1.5 text-small">
                  <input
                    type="checkbox"
                    name="class"
                    value={one}
                    defaultChecked={query.classes.includes(one)}
                    className="size-4 accent-[var(--lamp)]"
                  />
                  {one}
                </label>
              ))}
            </span>
          </fieldset>
          <label className={`${label} w-36`}>
            On a reference list
            <select name="known" defaultValue={query.known} className={field}>
              <option value="">either way</option>
              <option value="yes">known</option>
              <option value="no">new</option>
            </select>
          </label>
        </>
      ) : null}
      <label className={`${label} min-w-44 flex-1 sm:max-w-56`}>
        Near a position, degrees or hours
        <input
          type="text"
          name="near"
          defaultValue={query.nearText}
          placeholder="150.1 2.2"
          className={`${field} figures`}
        />
      </label>
      <label className={`${label} w-28`}>
        Within, arcmin
        <input
          type="text"
          inputMode="decimal"
          name="radius"
          defaultValue={query.radiusText}
          placeholder="10"
          className={`${field} figures`}
        />
      </label>
      <span className="flex gap-2">
        <Button type="submit">Show</Button>
        {isNarrowed(query) ? (
          <a
            href={`${links.page()}#entries`}
            className="inline-flex min-h-9 items-center px-2 text-small text-mute underline underline-offset-4 hover:text-text"
          >
            Clear
          </a>
        ) : null}
      </span>
    </form>
  )
}
