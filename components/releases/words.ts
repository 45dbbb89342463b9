import type { ReleaseAccess, ReleaseKind } from '@/db/schema/releases'

export const ACCESS_IN_WORDS: Record<ReleaseAccess, { label: string; meaning: string }> = {
  private: { label: 'Private', meaning: 'Leads and viewers of this campaign read it.' },
  link: { label: 'By link', meaning: 'Whoever has its link reads it, without an account.' },
  public: { label: 'Public', meaning: 'Anybody reads it, and programs find it by its cone search.' },
}

/** What stands before a release's number. */
export const KIND_IN_WORDS: Record<ReleaseKind, string> = {
  release: 'Release',
  erratum: 'Erratum, release',
  retraction: 'Retraction, release',
}

/** What a later release says of this one. */
export const noticeInWords = ({ kind, number }: { kind: 'erratum' | 'retraction'; number: number }): string =>
  kind === 'retraction' ? `Withdrawn by release ${number}` : `Corrected by release ${number}`
