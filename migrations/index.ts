import type { Migration } from 'kysely'
import * as mainPath from './001-main-path'
import * as archivesAndBatches from './002-archives-and-batches'
import * as judgementShown from './004-judgement-shown'
import * as invitationMail from './005-invitation-mail'
import * as looksAsked from './006-looks-asked'
import * as reliability from './007-reliability'
import * as jobHolder from './008-job-holder'
import * as gradingRoom from './009-grading-room'
import * as queueCounts from './010-queue-counts'
import * as toldTruth from './011-told-truth'
import * as matching from './012-matching'
import * as measuring from './013-measuring'
import * as releases from './014-releases'
import * as listing from './015-listing'
import * as lateGrades from './016-late-grades'

/** In order. A migration that has landed is never edited: a change is a new one. */
export const migrations: Record<string, Migration> = {
  '001-main-path': mainPath,
  '002-archives-and-batches': archivesAndBatches,
  '004-judgement-shown': judgementShown,
  '005-invitation-mail': invitationMail,
  '006-looks-asked': looksAsked,
  '007-reliability': reliability,
  '008-job-holder': jobHolder,
  '009-grading-room': gradingRoom,
  '010-queue-counts': queueCounts,
  '011-told-truth': toldTruth,
  '012-matching': matching,
  '013-measuring': measuring,
  '014-releases': releases,
  '015-listing': listing,
  '016-late-grades': lateGrades,
}
