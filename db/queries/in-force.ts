import { sql, type RawBuilder, type SqlBool } from 'kysely'
import type { FileFate } from '../schema/intake'

const list = (fates: readonly FileFate[]) => sql.join(fates)

/**
 * Of the files of one name the newest is in force, unless it has one of the fates of `unusable`: then the one that was in use
 * last among those with a fate of `usable`. Asks about a row of `file`.
 */
export const inForce = (
  unusable: readonly FileFate[],
  usable: readonly FileFate[],
): RawBuilder<SqlBool> => sql<SqlBool>`(
  file.replaced_by is null
  or (
    (select newer.fate from file newer where newer.id = file.replaced_by) in (${list(unusable)})
    and not exists (
      select 1 from file later
      where later.replaced_by = file.replaced_by and later.id != file.id and later.fate in (${list(usable)})
        and (later.updated_at, later.id) > (file.updated_at, file.id)
    )
  )
)`

/** A file to be read: no newer one of its name took its place, or that one was refused. */
export const isToBeRead = inForce(['refused'], ['stored', 'read', 'imaged'])
