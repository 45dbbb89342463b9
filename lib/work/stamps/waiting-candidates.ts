import type { WaitingFile } from '@/db/queries/intake'
import type { ManifestRow } from '@/db/schema/intake'

/** A stored file with what its name and the manifests tell. */
export interface MatchedFile {
  file: WaitingFile
  candidate: string
  /** null: its header tells, and it may hold all bands. */
  band: string | null
  rows: ManifestRow[]
}

/**
 * Files gathered by candidate until each has all of its bands. A candidate that lacks some waits, so that it is imaged once and
 * not once a band; when nothing more comes, what there is must do.
 */
export class WaitingCandidates {
  readonly #groups = new Map<string, MatchedFile[]>()
  #files = 0
  constructor(private readonly bands: number) {}

  /** Returns the candidate's files when they complete it, with `heldBands` that it has already, else keeps them. */
  add(matched: MatchedFile, heldBands: number): MatchedFile[] | null {
    const group = this.#groups.get(matched.candidate) ?? []
    group.push(matched)
    this.#groups.set(matched.candidate, group)
    this.#files++
    const told = new Set(group.flatMap(({ band }) => band ?? []))
    return told.size >= this.bands || heldBands >= this.bands ? this.#take(matched.candidate) : null
  }

  /** Everything that waits. */
  takeAll(): MatchedFile[][] {
    return [...this.#groups.keys()].map((candidate) => this.#take(candidate))
  }

  /** Candidates with a file that may hold all bands, came before `time`, and shows it only when it is opened. */
  takeUntoldBefore(time: string): MatchedFile[][] {
    const due = [...this.#groups].filter(([, group]) =>
      group.some(({ band, file }) => band === null && file.created_at < time),
    )
    return due.map(([candidate]) => this.#take(candidate))
  }

  get files(): number {
    return this.#files
  }

  #take(candidate: string): MatchedFile[] {
    const group = this.#groups.get(candidate) ?? []
    this.#groups.delete(candidate)
    this.#files -= group.length
    return group
  }
}
