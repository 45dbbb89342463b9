import 'server-only'
import { listHeldPlanes, type HeldPlaneRow } from '@/db/queries/cutouts'
import { listManifestRowsOfBases, listManifestRowsOfCandidates } from '@/db/queries/manifests'
import type { ManifestRow } from '@/db/schema/intake'
import { baseName } from '@/lib/work/intake/file-name'
import { manifestFacts } from '@/lib/work/intake/manifest-facts'
import { rowsOfFile } from '@/lib/work/intake/match-name'
import { groupBy } from '@/lib/work/intake/group-by'
import type { CampaignWork, ImagingTools } from './campaign-work'
import type { ToImage } from './run-imaging'
import type { MatchedFile } from './waiting-candidates'
import type { HeldPlane } from './worker-tasks'

const NAMES_PER_QUERY = 1000

/** Adds to groups of new files what is known of their candidates: planes of earlier files, manifest lines. */
export async function planImaging(
  tools: ImagingTools,
  { campaignId }: CampaignWork,
  groups: readonly MatchedFile[][],
): Promise<ToImage[]> {
  const planned: ToImage[] = []
  for (let start = 0; start < groups.length; start += NAMES_PER_QUERY) {
    const part = groups.slice(start, start + NAMES_PER_QUERY)
    const names = part.map(([{ candidate }]) => candidate)
    const rows = groupBy(
      await listManifestRowsOfCandidates(tools.db, campaignId, names),
      ({ candidate }) => candidate ?? '',
    )
    const held = groupBy(await listHeldPlanes(tools.db, campaignId, names), ({ candidate }) => candidate)
    const rowsOfHeld = await manifestRowsOfHeld(tools, campaignId, [...held.values()].flat())
    for (const group of part) {
      const { candidate } = group[0]
      const own = held.get(candidate) ?? []
      const told = [
        ...(rows.get(candidate) ?? []),
        ...group.flatMap((matched) => matched.rows),
        ...own.flatMap(({ fileName }) => rowsOfHeld(fileName)),
      ]
      planned.push(toImage(tools, group, own, told))
    }
  }
  return planned
}

async function manifestRowsOfHeld(
  tools: ImagingTools,
  campaignId: number,
  held: readonly HeldPlaneRow[],
): Promise<(fileName: string) => ManifestRow[]> {
  const bases = [...new Set(held.map(({ fileName }) => baseName(fileName)))]
  const byBase = groupBy(await listManifestRowsOfBases(tools.db, campaignId, bases), (row) =>
    (row.file_base ?? '').toLowerCase(),
  )
  return (fileName) => rowsOfFile(fileName, byBase.get(baseName(fileName).toLowerCase()) ?? [])
}

export function heldPlane({ blobs }: Pick<ImagingTools, 'blobs'>, row: HeldPlaneRow): HeldPlane {
  const { band, hdu, planeIndex, fileId, fileName, sha256 } = row
  return { band, hdu, planeIndex, file: { id: fileId, name: fileName, sha256, path: blobs.pathOf(sha256) } }
}

function toImage(tools: ImagingTools, group: MatchedFile[], held: HeldPlaneRow[], rows: ManifestRow[]): ToImage {
  const facts = manifestFacts(rows)
  const { raDeg, decDeg } = facts
  return {
    bytes: group.reduce((sum, { file }) => sum + file.bytes, 0),
    facts,
    candidate: {
      name: group[0].candidate,
      files: group.map(({ file: { id, name, sha256 }, band }) => ({
        id,
        name,
        sha256,
        band,
        path: tools.blobs.pathOf(sha256),
      })),
      held: held.map((row) => heldPlane(tools, row)),
      manifestPosition: raDeg !== null && decDeg !== null ? { raDeg, decDeg } : null,
    },
  }
}
