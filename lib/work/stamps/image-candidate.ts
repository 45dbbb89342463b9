import { separationArcsec } from '@/lib/science/sky/separation'
import { bandTaken } from '@/lib/work/intake/refusals'
import { drawStamps } from './draw-stamps'
import { bandPlane, readCutouts, readHeldPlane, type Cutout } from './read-cutout'
import type { StampWriter } from './stamp-store'
import {
  NOT_IMAGED,
  plannedPlanes,
  type CandidateOutcome,
  type CandidateToImage,
  type FileOutcome,
  type FileToRead,
  type HeldPlane,
  type ImageTask,
  type StoredFile,
} from './worker-tasks'

/** Farther than this from the other position of the same candidate, a person should look (common practice, no source). */
const FAR_ARCSEC = 5

interface Gathered {
  files: FileOutcome[]
  /** By band: of the files read now. */
  read: Map<string, Cutout>
  /** Earlier files of the same names, whose planes give way. */
  replaced: Set<number>
}

/** Reads a candidate's new files and makes its stamps of them and of the planes it has already, all in one go. */
export async function imageCandidate(
  candidate: CandidateToImage,
  task: ImageTask,
  stamps: StampWriter,
): Promise<CandidateOutcome> {
  const { files, read, replaced } = await gatherFiles(candidate, task.bands)
  const cutouts = new Map(read)
  const unreadable: string[] = []
  for (const held of candidate.held) {
    if (cutouts.has(held.band) || replaced.has(held.file.id)) continue
    const cutout = await readHeldPlane(held)
    if (cutout) cutouts.set(held.band, cutout)
    else unreadable.push(held.file.name)
  }
  const ordered = task.bands.flatMap((band) => cutouts.get(band) ?? [])
  addPositionNotes(files, ordered, candidate)
  const outcome: CandidateOutcome = {
    name: candidate.name,
    planned: plannedPlanes(candidate),
    files,
    planes: [...read.values()].map(({ plane }) => plane),
    position: ordered.find(({ centre }) => centre !== null)?.centre ?? null,
    pixelScaleArcsec: ordered.find(({ plane }) => plane.pixelScaleArcsec !== null)?.plane.pixelScaleArcsec ?? null,
    stamps: null,
    imagingFault: null,
  }
  if (unreadable.length > 0) {
    outcome.imagingFault = `${NOT_IMAGED}${unreadable.join(', ')} can no longer be read on the server. Send it again under the same name.`
    return outcome
  }
  return ordered.length === 0 ? outcome : drawn(outcome, ordered, task, stamps)
}

function drawn(
  outcome: CandidateOutcome,
  cutouts: Cutout[],
  { recipe }: ImageTask,
  stamps: StampWriter,
): CandidateOutcome {
  try {
    return { ...outcome, stamps: drawStamps(cutouts.map(bandPlane), recipe, stamps) }
  } catch (error) {
    // A full disk is no fault of the files: the whole job is tried again later.
    if (!(error instanceof Error) || 'code' in error) throw error
    return {
      ...outcome,
      imagingFault: `${NOT_IMAGED}it is read, but its pictures could not be made (${error.message}).`,
    }
  }
}

interface OpenedFile {
  file: FileToRead
  cutouts: Cutout[]
  notes: string[]
}

async function gatherFiles(candidate: CandidateToImage, bands: readonly string[]): Promise<Gathered> {
  const outcomes = new Map<number, FileOutcome>()
  const opened: OpenedFile[] = []
  for (const file of candidate.files) {
    const result = await readCutouts(file, bands)
    if (!('refusal' in result)) opened.push({ file, ...result })
    else {
      const kept = heldUnderName(candidate, file).length > 0 ? ' The earlier file of this name stays in use.' : ''
      const { fault, reason } = result.refusal
      outcomes.set(file.id, { id: file.id, fate: 'refused', fault, reason: reason + kept, duplicateOf: null })
    }
  }
  const standing = settleClashes(candidate, opened, outcomes)
  const gathered: Gathered = { files: [], read: new Map(), replaced: new Set() }
  for (const { file, cutouts, notes } of standing) {
    for (const cutout of cutouts) gathered.read.set(cutout.plane.band, cutout)
    const reason = notes.join(' ') || null
    outcomes.set(file.id, { id: file.id, fate: 'read', fault: null, reason, duplicateOf: null })
  }
  for (const file of candidate.files) {
    const outcome = outcomes.get(file.id)
    if (!outcome) continue
    gathered.files.push(outcome)
    if (outcome.fate !== 'refused') for (const old of heldUnderName(candidate, file)) gathered.replaced.add(old.file.id)
  }
  return gathered
}

const heldUnderName = (candidate: CandidateToImage, file: FileToRead) =>
  candidate.held.filter((held) => held.file.name === file.name && held.file.id !== file.id)

/**
 * Leaves out, one by one, the files that give a band which another has given; each that is left out may leave its earlier
 * version in force, which has its band again. So files whose bands were mixed up can be corrected together.
 */
function settleClashes(
  candidate: CandidateToImage,
  opened: readonly OpenedFile[],
  outcomes: Map<number, FileOutcome>,
): OpenedFile[] {
  let standing = [...opened]
  for (;;) {
    const givingWay = new Set(
      candidate.files
        .filter(({ id }) => outcomes.get(id)?.fate !== 'refused')
        .flatMap((file) => heldUnderName(candidate, file).map(({ file: old }) => old.id)),
    )
    const held = candidate.held.filter(({ file }) => !givingWay.has(file.id))
    const clash = firstClash(candidate.name, held, standing)
    if (!clash) return standing
    outcomes.set(clash.id, clash)
    standing = standing.filter(({ file }) => file.id !== clash.id)
  }
}

/** A band that another file has given already: the same bytes are a duplicate, other ones are refused. */
function firstClash(
  candidate: string,
  held: readonly HeldPlane[],
  standing: readonly OpenedFile[],
): FileOutcome | null {
  const holders = new Map<string, StoredFile>(held.map(({ band, file }) => [band, file]))
  for (const { file, cutouts } of standing) {
    for (const { plane } of cutouts) {
      const holder = holders.get(plane.band)
      if (!holder || holder.id === file.id) continue
      const duplicateOf = holder.id
      if (holder.sha256 !== file.sha256)
        return { id: file.id, fate: 'refused', ...bandTaken(candidate, plane.band, holder.name), duplicateOf }
      const reason = `The same bytes as '${holder.name}'.`
      return { id: file.id, fate: 'duplicate', fault: null, reason, duplicateOf }
    }
    for (const { plane } of cutouts) holders.set(plane.band, file)
  }
  return null
}

function addPositionNotes(files: FileOutcome[], cutouts: Cutout[], { manifestPosition }: CandidateToImage): void {
  const first = cutouts.find(({ centre }) => centre !== null)
  for (const file of files) {
    if (file.fate !== 'read') continue
    const own = cutouts.filter(({ plane }) => plane.fileId === file.id)
    const notes: string[] = [...new Set(own.flatMap(({ wcsFault }) => wcsFault ?? []))]
    const centre = own.find((cutout) => cutout.centre !== null)?.centre ?? null
    if (centre && manifestPosition) {
      const apart = separationArcsec(centre, manifestPosition)
      if (apart > FAR_ARCSEC) {
        notes.push(`The manifest's position is used; the middle of this image is ${arcsec(apart)} from it.`)
      }
    } else if (centre && first?.centre && first.plane.fileId !== file.id) {
      const apart = separationArcsec(centre, first.centre)
      if (apart > FAR_ARCSEC)
        notes.push(`Its middle is ${arcsec(apart)} from that of band ${first.plane.band}: is it the same object?`)
    } else if (!centre && !first && !manifestPosition) {
      notes.push('No position: the header has no usable WCS, and no manifest gives right ascension and declination.')
    }
    if (notes.length > 0) file.reason = [file.reason, ...notes].filter(Boolean).join(' ')
  }
}

const arcsec = (value: number): string =>
  value < 60
    ? `${value.toFixed(1)} arcsec`
    : value < 3600
      ? `${(value / 60).toFixed(1)} arcmin`
      : `${(value / 3600).toFixed(1)} degrees`
