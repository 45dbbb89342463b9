import type { CampaignTable, MembershipTable, RecipeTable, RuleTable } from './campaigns'
import type { DesignationTable, EntryTable } from './catalogue'
import type { EstimateTable, LeftOutTable, RulingTable, RunTable, StateChangeTable, VerdictTable } from './consensus'
import type { AskedLookTable, MentionTable, MessageTable } from './discussion'
import type {
  GradeTable,
  JudgementShownTable,
  LeaseTable,
  LookCountTable,
  PracticeAnswerTable,
  QueueCountTable,
  RepeatLookTable,
  SheetLeaseTable,
  SheetMarkTable,
} from './grading'
import type {
  BatchTable,
  CandidateTable,
  FileProblemTable,
  FileTable,
  ManifestRowTable,
  PlaneTable,
  StampTable,
} from './intake'
import type {
  CandidateMatchTable,
  MatchDecisionTable,
  MatchDueTable,
  MergeTable,
  ObjectMatchTable,
  ReferenceListTable,
  ReferenceObjectTable,
} from './matching'
import type { MeasurementTable } from './measuring'
import type { JudgedTable, ListingTable, SavedViewTable } from './listing'
import type { InvitationTable, PersonTable } from './people'
import type {
  ReleaseAccessTable,
  ReleaseCandidateTable,
  ReleaseEntryTable,
  ReleaseFileTable,
  ReleaseGivenUpTable,
  ReleaseTable,
} from './releases'
import type { AuditEventTable, JobTable, MailTable, SiteTable } from './platform'

export interface DB {
  site: SiteTable
  person: PersonTable
  campaign: CampaignTable
  membership: MembershipTable
  invitation: InvitationTable
  rule: RuleTable
  recipe: RecipeTable
  batch: BatchTable
  file: FileTable
  file_problem: FileProblemTable
  manifest_row: ManifestRowTable
  candidate: CandidateTable
  state_change: StateChangeTable
  plane: PlaneTable
  stamp: StampTable
  lease: LeaseTable
  grade: GradeTable
  judgement_shown: JudgementShownTable
  sheet_mark: SheetMarkTable
  sheet_lease: SheetLeaseTable
  queue_count: QueueCountTable
  look_count: LookCountTable
  practice_answer: PracticeAnswerTable
  repeat_look: RepeatLookTable
  run: RunTable
  verdict: VerdictTable
  estimate: EstimateTable
  left_out: LeftOutTable
  asked_look: AskedLookTable
  message: MessageTable
  mention: MentionTable
  ruling: RulingTable
  reference_list: ReferenceListTable
  reference_object: ReferenceObjectTable
  object_match: ObjectMatchTable
  candidate_match: CandidateMatchTable
  match_due: MatchDueTable
  match_decision: MatchDecisionTable
  merge: MergeTable
  measurement: MeasurementTable
  designation: DesignationTable
  entry: EntryTable
  release: ReleaseTable
  release_candidate: ReleaseCandidateTable
  release_entry: ReleaseEntryTable
  release_file: ReleaseFileTable
  release_given_up: ReleaseGivenUpTable
  release_access: ReleaseAccessTable
  listing: ListingTable
  judged: JudgedTable
  saved_view: SavedViewTable
  job: JobTable
  mail: MailTable
  audit_event: AuditEventTable
}
