import Link from 'next/link'
import { day } from '@/components/campaigns/in-words'
import type { KnownList } from '@/lib/work/matching/known-page'

const STATES: Record<KnownList['state'], string> = {
  draft: 'columns to be chosen',
  reading: 'being read',
  ready: 'in force',
  refused: 'refused',
  retired: 'retired',
}

const TONES: Record<KnownList['state'], string> = {
  draft: 'border-edge/60 text-mute',
  reading: 'border-edge/60 text-mute',
  ready: 'border-lamp/70 text-lamp font-semibold',
  refused: 'border-alarm/70 text-alarm',
  retired: 'border-edge/60 text-mute line-through decoration-1',
}

export function ListState({ state }: { state: KnownList['state'] }) {
  return (
    <span className={`inline-block whitespace-nowrap rounded-full border px-2 text-note ${TONES[state]}`}>
      {STATES[state]}
    </span>
  )
}

function workOf({ work, state }: KnownList): string | null {
  if (work?.does === 'matching') return `${work.done.toLocaleString('en')} candidates matched`
  if (work || state === 'reading')
    return work?.done ? `${work.done.toLocaleString('en')} rows read` : 'waits to be read'
  return null
}

const HEAD = 'border-b border-edge/60 px-3 py-2 text-left text-note font-normal text-mute first:pl-0'
const CELL = 'border-b border-line px-3 py-2.5 align-top first:pl-0'

/** Every list with what it is, what it knows and what it does. */
export function ListTable({ slug, lists, isLead }: { slug: string; lists: readonly KnownList[]; isLead: boolean }) {
  return (
    <div className="relative overflow-x-auto" tabIndex={0} role="region" aria-label="Lists of known objects">
      <table className="w-full min-w-[52rem] border-collapse text-small">
        <thead>
          <tr>
            <th scope="col" className={HEAD}>
              List
            </th>
            <th scope="col" className={HEAD}>
              Source and date
            </th>
            <th scope="col" className={`${HEAD} text-right`}>
              Rows
            </th>
            <th scope="col" className={`${HEAD} text-right`}>
              Radius
            </th>
            <th scope="col" className={`${HEAD} text-right`}>
              Candidates
            </th>
            <th scope="col" className={HEAD}>
              State
            </th>
          </tr>
        </thead>
        <tbody>
          {lists.map((list) => (
            <tr key={list.id} className={list.state === 'retired' ? 'text-mute' : ''}>
              <th scope="row" className={`${CELL} min-w-44 text-left font-semibold`}>
                {isLead ? (
                  <Link
                    href={`/campaigns/${slug}/known/${list.id}`}
                    className="inline-block min-h-6 underline decoration-edge underline-offset-4 hover:decoration-text [overflow-wrap:anywhere]"
                  >
                    {list.name}
                  </Link>
                ) : (
                  list.name
                )}
                <span className="figures block text-note font-normal text-mute [overflow-wrap:anywhere]">
                  {list.fileName}
                </span>
              </th>
              <td className={`${CELL} min-w-52`}>
                {list.source || <span className="text-mute">not told yet</span>}
                <span className="block text-note text-mute">
                  {list.listDate ? `${list.listDate} · ` : ''}sent {day(list.uploadedAt)}
                </span>
              </td>
              <td className={`figures ${CELL} text-right`}>
                {list.rows > 0 ? list.rows.toLocaleString('en') : '–'}
                {list.positions < list.rows ? (
                  <span className="block text-note text-mute">{list.positions.toLocaleString('en')} placed</span>
                ) : null}
              </td>
              <td className={`figures ${CELL} text-right`}>{list.radiusArcsec}″</td>
              <td className={`figures ${CELL} text-right`}>
                {list.state === 'ready' ? list.matched.toLocaleString('en') : '–'}
              </td>
              <td className={`${CELL} max-w-80`}>
                <ListState state={list.state} />
                <span role={workOf(list) ? 'status' : undefined} className="block text-note text-mute">
                  {workOf(list) ??
                    (list.state === 'refused'
                      ? (list.reason?.split('\n')[0] ?? '')
                      : list.state === 'ready'
                        ? list.keepsOutOfNew
                          ? 'kept out of new'
                          : 'labels only'
                        : '')}
                </span>
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}
